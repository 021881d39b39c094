// The demo's two RFQs for the receive filter: one to decide on, one open for quotes.
import { Temporal } from "temporal-polyfill";
import { PROPOSED_SETUP } from "~/forms/setup";
import type { MeasurementPlan } from "~/rf/measurement-plan";
import { closeRfq } from "~/services/closing.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { addInvitations } from "~/services/invitations.server";
import type { Person } from "~/services/person.server";
import { listSuppliers, setSupplierStatus } from "~/services/suppliers.server";
import { createRfq, openRfq, type RfqFields } from "~/services/rfqs.server";
import { PEOPLE, TIME_ZONE } from "./demo-cast";
import { made } from "./demo-steps";

const HALDEN = { company: "Halden Resonator Works", email: PEOPLE.halden.email };
const KESTREL = { company: "Kestrel Cavity Filters", email: PEOPLE.kestrel.email };
const ORME = { company: "Orme Microwave", email: PEOPLE.orme.email };

/** Seventeen o'clock, so many days from now, where the buyer is. */
const dueIn = (days: number): Date =>
  new Date(
    Temporal.Now.plainDateISO(TIME_ZONE).add({ days }).toZonedDateTime({ timeZone: TIME_ZONE, plainTime: "17:00" })
      .epochMilliseconds,
  );

const QUARTER_MS = 15 * 60 * 1000;
const QUOTING_TAKES_MS = 5 * 60 * 1000;

/** The first quarter of an hour that leaves the suppliers of the demo time to quote: it has passed soon after. */
const dueSoon = (): Date => new Date(Math.ceil((Date.now() + QUOTING_TAKES_MS) / QUARTER_MS) * QUARTER_MS);

/** The sweeps as they are proposed for the receive filter; the demo's files keep to all of it. */
const MEASUREMENT_PLAN: MeasurementPlan = {
  sweeps: [
    { band: [1.76e9, 2.14e9], maxStep: 2e6 },
    { band: [1.92e9, 1.98e9], maxStep: 600e3 },
  ],
  ifBandwidth: 1000,
  power: 0,
  referencePlane: "connector",
  referencePlaneWords: "SMA, at the mating plane of both ports",
};

const COMMON = {
  dueZone: TIME_ZONE,
  decisionRule: "simple",
  currency: "EUR",
  unitsAsked: 3,
  unitsOverRange: 1,
  measurementPlan: MEASUREMENT_PLAN,
  assumedSetup: PROPOSED_SETUP,
} as const;

/** Opens the RFQ that is to be decided, and returns its public id. */
export const requestFirstSeries = (engineer: Person, specification: string): Promise<string> =>
  request(engineer, specification, [HALDEN, KESTREL, ORME], {
    ...COMMON,
    title: "Receive band-pass, first series",
    breaks: [100, 500, 1000],
    askedQuantity: 500,
    dueAt: dueSoon(),
    text: "Measured data of three units, one of them at −30, 25 and 70 °C. Lead time counts from the order.",
  });

/** Opens the RFQ that stays open. */
export const requestOutdoorSeries = (engineer: Person, specification: string): Promise<string> =>
  request(engineer, specification, [HALDEN, KESTREL], {
    ...COMMON,
    title: "Receive band-pass, outdoor series",
    breaks: [500, 2000],
    askedQuantity: 2000,
    dueAt: dueIn(16),
    text: "",
  });

async function request(
  engineer: Person,
  specification: string,
  invited: readonly { readonly company: string; readonly email: string }[],
  fields: RfqFields,
): Promise<string> {
  const written = await createRfq(engineer, newIdempotencyKey(), specification, fields);
  const { publicId } = made("write an RFQ", written);
  const rows = invited.map((row, index) => ({ ...row, index }));
  made("invite suppliers", await addInvitations(engineer, newIdempotencyKey(), publicId, rows));
  made("open an RFQ", await openRfq(engineer, newIdempotencyKey(), publicId));
  return publicId;
}

/** Two of the three have delivered before. */
export async function approveSuppliers(purchasing: Person): Promise<void> {
  const { entries } = await listSuppliers(purchasing, { status: null, page: 1 });
  for (const { name, publicId } of entries)
    if (name !== ORME.company) made("approve a supplier", await setSupplierStatus(purchasing, publicId, "approved"));
}

export async function closeRequest(engineer: Person, rfq: string): Promise<void> {
  made("close an RFQ", await closeRfq(engineer, rfq));
}
