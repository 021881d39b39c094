// The invitation's link on its way from the address to the answer: a signed cookie for half an hour.
import { createCookie, type Cookie } from "react-router";
import { config } from "~/config.server";

const MAX_AGE_SECONDS = 30 * 60;

let cookie: Cookie | undefined;

/** At the root, because a narrower path would leave out the page's data address, `/invitation.data`. */
function invitationCookie(): Cookie {
  const secure = config().appUrl.startsWith("https://");
  cookie ??= createCookie(secure ? "__Host-tenderband-invitation" : "tenderband-invitation", {
    httpOnly: true,
    secure,
    sameSite: "lax",
    path: "/",
    secrets: config().sessionSecrets,
    maxAge: MAX_AGE_SECONDS,
  });
  return cookie;
}

/** What every answer about a link carries: kept by no cache, and no address of it goes to another page. */
export const LINK_HEADERS = { "Cache-Control": "no-store", "Referrer-Policy": "no-referrer" } as const;

const TOKEN = /^[\w-]{43}$/;

/** The Set-Cookie header that keeps a link's token; what cannot be one is kept as none. */
export const keepInvitationToken = (token: string): Promise<string> =>
  TOKEN.test(token) ? invitationCookie().serialize(token) : forgetInvitationToken();

export const forgetInvitationToken = (): Promise<string> => invitationCookie().serialize("", { maxAge: 0 });

/** The token kept for this browser, or null. */
export async function readInvitationToken(request: Request): Promise<string | null> {
  const token: unknown = await invitationCookie().parse(request.headers.get("Cookie"));
  return typeof token === "string" && TOKEN.test(token) ? token : null;
}
