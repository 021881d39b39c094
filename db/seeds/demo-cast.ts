// Who acts in the demo, all invented, and how they sign in.

/** One for all of the demo: it guards nothing but an invented scenario. */
export const PASSWORD = "coupled-iris-tuning";
export const BUYER = "Northgate Radio";
export const TIME_ZONE = "Europe/Berlin";

interface DemoPerson {
  readonly name: string;
  readonly email: string;
  readonly role: string;
}

export const PEOPLE = {
  engineer: { name: "Mira Talvio", email: "engineer@northgate.example.com", role: `engineer, ${BUYER}` },
  purchasing: { name: "Joss Arden", email: "purchasing@northgate.example.com", role: `purchasing, ${BUYER}` },
  admin: { name: "Tamsin Hale", email: "admin@northgate.example.com", role: `administrator, ${BUYER}` },
  halden: { name: "Odo Brandt", email: "sales@halden.example.com", role: "supplier, Halden Resonator Works" },
  kestrel: { name: "Pia Keswick", email: "sales@kestrel.example.com", role: "supplier, Kestrel Cavity Filters" },
  orme: { name: "Runa Orme", email: "sales@orme.example.com", role: "supplier, Orme Microwave" },
} as const satisfies Record<string, DemoPerson>;

/** Addresses and passwords for the terminal and the sign-in of a visitor. */
export const demoSignIns: readonly { role: string; email: string; password: string }[] = Object.values(PEOPLE).map(
  ({ role, email }) => ({ role, email, password: PASSWORD }),
);
