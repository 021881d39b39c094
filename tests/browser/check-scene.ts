// Sets the scene of a check before upload in the product's database, and later submits what was uploaded: a program of its own, for
// services read their configuration once. `prepare` prints where the supplier works, `submit QUOTE LEFT-OUT-FILE` what the version is.
import { MeasurementRow, StoredFile, User } from "~/db/models";
import { sequelize } from "~/db/connection.server";
import { SYSTEM } from "~/db/scoping";
import type { SpecificationLine } from "~/rf/line-definition";
import { compareLineNumbers } from "~/rf/line-numbers";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { removeMeasurement } from "~/services/measurement-changes.server";
import { hashPassword } from "~/services/passwords.server";
import { submitQuote } from "~/services/quote-submission.server";
import { personOf } from "../../db/seeds/demo-steps";
import { JOURNEY_LINES } from "../support/journey";
import { buildJourneyQuote, COMPLETE_DRAFT } from "../support/supplier-journey";

const PASSBAND = [1.92e9, 1.98e9] as const;

/** Besides the demo's lines one of every kind it has not, one at ambient alone, and one that no file reaches. */
const FURTHER_LINES: readonly SpecificationLine[] = [
  { lineKey: "lineisol", lineNumber: "3.7", definition: { kind: "rejection", band: [0, 1.5e9], min: 40 } },
  {
    lineKey: "lineambi",
    lineNumber: "3.8",
    definition: { kind: "rejection", band: [2.05e9, 2.1e9], min: 55, temperature: "ambient", maxStep: 6e5 },
  },
  { lineKey: "linedela", lineNumber: "5.1", definition: { kind: "group-delay", band: PASSBAND, max: 40e-9 } },
  {
    lineKey: "lineaper",
    lineNumber: "5.2",
    definition: { kind: "group-delay", band: PASSBAND, max: 40e-9, aperture: 2e6 },
  },
  {
    lineKey: "linevari",
    lineNumber: "5.3",
    definition: { kind: "group-delay-variation", band: PASSBAND, max: 20e-9, window: 20e6, aperture: 2e6 },
  },
  { lineKey: "linephas", lineNumber: "5.4", definition: { kind: "phase-linearity", band: PASSBAND, max: 40 } },
  {
    lineKey: "linecent",
    lineNumber: "2.3",
    definition: { kind: "centre-frequency", level: 3, nominal: 1.95e9, tolerance: 1e6 },
  },
  { lineKey: "linebwid", lineNumber: "2.4", definition: { kind: "bandwidth", level: 3, min: 60e6, max: 75e6 } },
  { lineKey: "lineshap", lineNumber: "2.5", definition: { kind: "shape-factor", levels: [3, 30], max: 1.6 } },
];

/** A setup that differs from what the RFQ assumes, and a drift: both count in the browser as on the server. */
const STATED = {
  "setup.transmission": "0.06 dB",
  "setup.directivity": "42 dB",
  "setup.groupDelay": "0.4 ns",
  "drift.ppmPerKelvin": "±2 ppm/K",
};

const LINES = [...JOURNEY_LINES, ...FURTHER_LINES].sort((one, other) =>
  compareLineNumbers(one.lineNumber, other.lineNumber),
);

const PASSWORD = "irises before windows";

async function prepare() {
  const { person, quote } = await buildJourneyQuote("Fenwick Cavities", {}, LINES);
  await quote.update({ draft: { values: { ...COMPLETE_DRAFT, ...STATED } } });
  const email = `check-${quote.publicId}@fenwick.example.test`;
  const passwordHash = await hashPassword(PASSWORD);
  await User.update({ email, passwordHash }, { where: { id: person.userId }, actor: SYSTEM });
  return { email, password: PASSWORD, quote: quote.publicId };
}

/** Takes one file out, then submits the rest. */
async function submit(email: string, quote: string, leftOut: string) {
  const person = await personOf(email);
  const file = await StoredFile.findOne({ where: { name: leftOut }, actor: person, rejectOnEmpty: true });
  const row = await MeasurementRow.findOne({ where: { fileId: file.id }, actor: person, rejectOnEmpty: true });
  await removeMeasurement(person, row.publicId);
  return submitQuote(person, quote, newIdempotencyKey());
}

const [command, email = "", quote = "", leftOut = ""] = process.argv.slice(2);
try {
  console.log(JSON.stringify(command === "submit" ? await submit(email, quote, leftOut) : await prepare()));
} finally {
  await sequelize.close();
}
