// The signed-in person a use case runs for: an actor with a name, an address, and the request it came by.
import type { Actor } from "~/workflow/visibility";

export interface Person extends Actor {
  readonly publicId: string;
  readonly name: string;
  readonly email: string;
  readonly organisationName: string;
  /** IANA name of the zone the person reads times in. */
  readonly timeZone: string;
  readonly requestId?: string;
  readonly ip?: string;
}
