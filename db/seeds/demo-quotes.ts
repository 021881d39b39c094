// What the demo's suppliers do: accept by their link, upload their files, type their terms, declare, submit.
import { readdir, readFile } from "node:fs/promises";
import path from "node:path";
import { Temporal } from "temporal-polyfill";
import { Quote, Rfq } from "~/db/models";
import { acceptAsMember, acceptAsNew, readOffer } from "~/services/invitation-acceptance.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { runNextScoring } from "~/services/jobs.server";
import { addMeasurement } from "~/services/measurements.server";
import type { Person } from "~/services/person.server";
import { submitQuote } from "~/services/quote-submission.server";
import { saveDraft, startQuote } from "~/services/quotes.server";
import { scoreVersion } from "~/services/scoring.server";
import { readLines } from "~/services/specification-lines.server";
import { PASSWORD, PEOPLE } from "./demo-cast";
import { made, mailedToken, personOf } from "./demo-steps";

const DATA = path.join("db", "seeds", "demo-data");

type Texts = Readonly<Record<string, string>>;

interface Offer {
  readonly email: string;
  readonly name: string;
  readonly company: string;
  /** Folder of its measured data. */
  readonly folder: string;
  readonly terms: Texts;
  /** Answers to the declared lines, by what is declared. */
  readonly answers: Readonly<Record<string, { readonly answer: string; readonly text: string }>>;
}

/** The day so many days from now, "2027-03-31". */
const dayIn = (days: number): string => Temporal.Now.plainDateISO("UTC").add({ days }).toString();

const HALDEN: Offer = {
  ...PEOPLE.halden,
  company: "Halden Resonator Works",
  folder: "halden-resonator-works",
  terms: {
    "prices.100": "128.00",
    "prices.500": "96.50",
    "prices.1000": "88.00",
    nre: "4800",
    leadFirstDays: "42",
    leadVolumeDays: "70",
    validUntil: dayIn(90),
    minimumQuantity: "50",
    incoterms: "DAP",
    place: "Berlin",
    paymentTerms: "30 days net",
    basis: "measured",
  },
  answers: {
    "Input power, continuous": { answer: "comply", text: "35 W at 70 °C" },
    Connectors: { answer: "comply", text: "" },
  },
};

const KESTREL: Offer = {
  ...PEOPLE.kestrel,
  company: "Kestrel Cavity Filters",
  folder: "kestrel-cavity-filters",
  terms: {
    "prices.100": "104.00",
    "prices.500": "79.80",
    "prices.1000": "74.20",
    nre: "2500",
    leadFirstDays: "35",
    leadVolumeDays: "56",
    validUntil: dayIn(60),
    incoterms: "FCA",
    place: "Leeds",
    paymentTerms: "30 days net",
    basis: "measured",
  },
  answers: {
    "Input power, continuous": { answer: "comply", text: "25 W" },
    Connectors: { answer: "comply", text: "" },
  },
};

const ORME: Offer = {
  ...PEOPLE.orme,
  company: "Orme Microwave",
  folder: "orme-microwave",
  terms: {
    "prices.500": "112.00",
    nre: "0",
    leadVolumeDays: "84",
    validUntil: dayIn(45),
    basis: "similar",
    remarks: "Data of a similar part at room temperature; data over temperature follows with the first units.",
  },
  answers: {
    "Input power, continuous": { answer: "comply", text: "20 W" },
    Connectors: { answer: "comply", text: "" },
  },
};

/** All three accept as new accounts, fill their quotes and submit; the scores are there at first sight. */
export async function quoteFirstSeries(): Promise<void> {
  for (const offer of [HALDEN, KESTREL, ORME]) {
    const invitation = await acceptWithNewAccount(offer);
    const person = await personOf(offer.email);
    const { quote } = made("start a quote", await startQuote(person, invitation));
    await uploadFiles(person, quote, offer.folder);
    await typeTerms(person, quote, { ...offer.terms, ...(await declarations(person, quote, offer)) });
    made("submit a quote", await submitQuote(person, quote, newIdempotencyKey()));
  }
  await scoreSubmitted();
}

/** One unit's files are up and a price is typed; the rest is the visitor's to do. */
export async function beginOutdoorQuote(): Promise<void> {
  const { email, folder } = HALDEN;
  const person = await personOf(email);
  const token = await mailedToken(email);
  const offered = (await readOffer(token))?.invitation ?? "";
  const { invitation } = made("accept as a member", await acceptAsMember(person, token, offered, false));
  const { quote } = made("start a quote", await startQuote(person, invitation));
  await uploadFiles(person, quote, folder, "HR2-0411");
  await typeTerms(person, quote, { "prices.500": "96.50", leadVolumeDays: "70" });
}

/** What the worker does as soon as it runs. */
async function scoreSubmitted(): Promise<void> {
  const fail = (error: unknown) => {
    throw error;
  };
  while (await runNextScoring(scoreVersion, fail));
}

async function acceptWithNewAccount({ email, name, company }: Offer): Promise<string> {
  const token = await mailedToken(email);
  const offered = (await readOffer(token))?.invitation ?? "";
  const account = { organisationName: company, name, password: PASSWORD, passwordAgain: PASSWORD };
  return made("accept an invitation", await acceptAsNew(token, offered, account, {})).invitation;
}

async function uploadFiles(person: Person, quote: string, folder: string, unit = ""): Promise<void> {
  const names = (await readdir(path.join(DATA, folder))).filter((name) => name.startsWith(unit)).sort();
  for (const name of names) {
    const bytes = await readFile(path.join(DATA, folder, name));
    made(`upload ${name}`, await addMeasurement(person, quote, { name, bytes }));
  }
}

async function typeTerms(person: Person, quote: string, values: Texts): Promise<void> {
  const { lockVersion } = await Quote.findOne({ where: { publicId: quote }, actor: person, rejectOnEmpty: true });
  made("save the terms", await saveDraft(person, quote, values, lockVersion));
}

/** The fields of the declared lines: their keys are random, so that they are found by what is declared. */
async function declarations(person: Person, quote: string, { answers }: Offer): Promise<Texts> {
  const { rfqId } = await Quote.findOne({ where: { publicId: quote }, actor: person, rejectOnEmpty: true });
  const { revisionId } = await Rfq.findByPk(rfqId, { actor: person, rejectOnEmpty: true });
  const fields = (await readLines(person, revisionId)).flatMap(({ lineKey, definition }) => {
    if (definition.kind !== "declared") return [];
    const given = answers[definition.name];
    if (!given) throw new Error(`the demo has no answer for “${definition.name}”`);
    const name = `declarations.${lineKey}`;
    return [[`${name}.answer`, given.answer] as const, [`${name}.text`, given.text] as const];
  });
  return Object.fromEntries(fields);
}
