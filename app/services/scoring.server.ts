// Scores a submitted version: every line over all units and temperatures, the summary that lists read, and both mails.
import type { Transaction } from "sequelize";
import { config } from "~/config.server";
import {
  Invitation,
  MeasurementResult,
  Organisation,
  OutboxEmail,
  Quote,
  QuoteDeclaration,
  QuoteLineResult,
  QuoteSummary,
  QuoteVersion,
  Rfq,
  Supplier,
  User,
  VersionMeasurement,
} from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import {
  complies,
  CORE_VERSION,
  evaluateLot,
  storeCell,
  verdictRank,
  worstVerdict,
  type Measurement,
  type Row,
  type SpecificationLine,
  type Verdict,
} from "~/rf/index";
import { isMeasured } from "~/rf/line-definition";
import { coversRange } from "~/rf/lot-temperature";
import { identicalUnits } from "~/rf/same-data";
import { lotOptionsOf, scoreSweep, setupInUse } from "~/rf/score-sweep";
import { rfqNumber } from "~/workflow/numbers";
import { recordEvent } from "./audit.server";
import { readNetworks, type MeasuredNetwork } from "./measured-networks.server";
import { queueMail } from "./outbox.server";
import { receiptOf } from "./quote-submission.server";
import { resultLines } from "./result-lines.server";
import { readScoringFrame, resultRow, setupHash, type ScoringFrame } from "./scoring-sweeps.server";
import { inTransaction } from "./transaction.server";
import { standingOf, worstStanding, type LineStanding } from "./worst-line.server";

interface Subject {
  readonly version: QuoteVersion;
  readonly quote: Quote;
  readonly rfq: Rfq;
  readonly frame: ScoringFrame;
}

/**
 * Scores a version and stores what came out, with mails and history entry, in one transaction; run again it leaves the same
 * and mails nothing twice. Figures come from the bytes as uploaded.
 *
 * @param report told how many of the version's files have been read
 */
export async function scoreVersion(
  versionId: number,
  report: (done: number, total: number) => Promise<void> = () => Promise.resolve(),
): Promise<void> {
  const subject = await readSubject(versionId);
  const links = await VersionMeasurement.findAll({
    where: { versionId },
    order: [["measurementId", "ASC"]],
    actor: SYSTEM,
  });
  const ids = links.map(({ measurementId }) => measurementId);
  await report(0, ids.length);
  const sweeps = await readNetworks(SYSTEM, ids, (done) => report(done, ids.length));
  const missing = await missingSweepScores(subject, sweeps);
  const rows = evaluateLot(lotOf(subject, sweeps), subject.frame.requirements, {
    ...lotOptionsOf(subject.frame, subject.rfq),
    basis: subject.version.basis,
  });
  await inTransaction((transaction) => storeScores(subject, sweeps, missing, rows, transaction));
}

async function readSubject(versionId: number): Promise<Subject> {
  const system = { actor: SYSTEM, rejectOnEmpty: true } as const;
  const version = await QuoteVersion.findByPk(versionId, system);
  const [quote, rfq] = await Promise.all([
    Quote.findByPk(version.quoteId, system),
    Rfq.findByPk(version.rfqId, system),
  ]);
  const { revisionId } = version;
  const frame = await readScoringFrame(SYSTEM, { revisionId, measurementPlan: rfq.measurementPlan });
  return { version, quote, rfq, frame };
}

const temperatureOf = ({ measurement }: MeasuredNetwork): number => Number(measurement.temperature);
const unitOf = ({ measurement }: MeasuredNetwork): string => measurement.serial ?? "";

/** A sweep goes by its measurement's public id, so that a cell leads to its file. */
const lotOf = ({ version }: Subject, sweeps: readonly MeasuredNetwork[]): Measurement[] =>
  sweeps.map((sweep) => ({
    unit: unitOf(sweep),
    temperature: temperatureOf(sweep),
    sweeps: [
      { id: sweep.measurement.publicId, network: sweep.network, setup: sweep.measurement.setup ?? version.setup },
    ],
  }));

/** Rows of single sweeps not scored yet with this setup by this core. */
async function missingSweepScores({ version, rfq, frame }: Subject, sweeps: readonly MeasuredNetwork[]) {
  const now = await databaseNow();
  const stored = await MeasurementResult.findAll({
    where: {
      measurementId: sweeps.map(({ measurement }) => measurement.id),
      revisionId: frame.revisionId,
      coreVersion: CORE_VERSION,
    },
    attributes: ["measurementId", "setupHash"],
    actor: SYSTEM,
  });
  const known = new Set(stored.map((row) => `${row.measurementId} ${row.setupHash}`));
  return sweeps.flatMap(({ measurement, network }) => {
    const stated = measurement.setup ?? version.setup;
    const setup = setupInUse(stated, rfq.assumedSetup);
    if (known.has(`${measurement.id} ${setupHash(setup)}`)) return [];
    return [resultRow(measurement, frame, setup, scoreSweep(network, frame, stated, rfq.assumedSetup), now)];
  });
}

async function storeScores(
  subject: Subject,
  sweeps: readonly MeasuredNetwork[],
  missing: readonly ReturnType<typeof resultRow>[],
  rows: readonly Row[],
  transaction: Transaction,
): Promise<void> {
  const { version, frame } = subject;
  const system = { actor: SYSTEM, transaction } as const;
  // Two workers that score the same version stand in line here.
  await QuoteVersion.findByPk(version.id, { ...system, lock: transaction.LOCK.UPDATE });
  const declarations = await QuoteDeclaration.findAll({ where: { versionId: version.id }, ...system });
  const key = { versionId: version.id, revisionId: frame.revisionId, coreVersion: CORE_VERSION };
  const now = await databaseNow(transaction);
  const results = [...measuredRows(subject, rows), ...declaredRows(subject, declarations)];
  const summary = summarise(subject, sweeps, results);
  await MeasurementResult.bulkCreate([...missing], { transaction, ignoreDuplicates: true });
  await QuoteLineResult.destroy({ where: key, ...system });
  await QuoteSummary.destroy({ where: key, ...system });
  const own = { ...key, ...tenantsOf(version) };
  await QuoteLineResult.bulkCreate(
    results.map(({ standing: _, ...columns }) => ({ ...own, ...columns })),
    {
      transaction,
    },
  );
  await QuoteSummary.create({ ...own, ...summary, createdAt: now }, { transaction });
  const lines = frame.lines;
  await queueMails(subject, summary, resultLines(lines, results), now, transaction);
}

const tenantsOf = ({ buyerOrganisationId, supplierOrganisationId }: QuoteVersion) => ({
  buyerOrganisationId,
  supplierOrganisationId,
});

interface LineColumns {
  readonly lineKey: string;
  readonly verdict: Verdict | "declared" | "exception";
  readonly value: number | null;
  readonly margin: number | null;
  readonly creditedMargin: number | null;
  readonly frequency: number | null;
  readonly unit: string | null;
  readonly temperature: string | null;
  readonly cells: ReturnType<typeof storeCell>[];
  readonly reason: string | null;
  /** Of a measured line. */
  readonly standing: LineStanding | null;
}

const finite = (value: number | undefined): number | null =>
  value !== undefined && Number.isFinite(value) ? value : null;

function measuredRows({ frame }: Subject, rows: readonly Row[]): LineColumns[] {
  const lines = new Map(frame.lines.map((line) => [line.lineKey, line]));
  return rows.map((row) => {
    const worst = row.cells[row.worst];
    const cells = row.cells.map(storeCell);
    const line = lines.get(row.requirementId) as SpecificationLine;
    const standing = standingOf(line, row.verdict, cells[row.worst]?.result);
    return {
      lineKey: row.requirementId,
      verdict: row.verdict,
      value: finite(worst?.result.value),
      margin: standing.margin,
      creditedMargin: standing.creditedMargin,
      frequency: finite(worst?.result.frequency),
      unit: worst?.unit ?? null,
      temperature: worst === undefined ? null : worst.temperature.toFixed(1),
      cells,
      reason: row.reason ?? null,
      standing,
    };
  });
}

const BARE = {
  value: null,
  margin: null,
  creditedMargin: null,
  frequency: null,
  unit: null,
  temperature: null,
  standing: null,
} as const;

function declaredRows({ frame }: Subject, declarations: readonly QuoteDeclaration[]): LineColumns[] {
  const answers = new Map(declarations.map((declaration) => [declaration.lineKey, declaration]));
  return frame.lines
    .filter(({ definition }) => !isMeasured(definition))
    .map(({ lineKey }) => {
      const answer = answers.get(lineKey);
      if (!answer) return { ...BARE, lineKey, verdict: "not-covered", cells: [], reason: "Not answered." };
      const verdict = answer.answer === "exception" ? "exception" : "declared";
      return { ...BARE, lineKey, verdict, cells: [], reason: answer.text };
    });
}

/**
 * `verdict`, `worstLineKey` and `worstMargin` speak of the measured lines: the worst verdict, and among lines that have it
 * the least credited margin. `worstCreditedMargin` is the least over all measured lines, which ranking goes by. `conforming`
 * takes the declared lines in too: an exception nobody accepted counts as fail. Units whose data is the same to the bit
 * count as one.
 */
function summarise({ frame, rfq }: Subject, sweeps: readonly MeasuredNetwork[], results: readonly LineColumns[]) {
  const standings = results.flatMap(({ standing }) => standing ?? []);
  const worst = worstStanding(standings);
  const credits = standings.flatMap(({ creditedMargin }) => creditedMargin ?? []);
  const { range, ambient } = frame;
  const aliases = identicalUnits(sweeps.map((sweep) => ({ unit: unitOf(sweep), network: sweep.network })));
  const countedUnit = (sweep: MeasuredNetwork) => aliases.get(unitOf(sweep)) ?? unitOf(sweep);
  const units = [...new Set(sweeps.map(countedUnit))];
  const covering = units.filter((unit) => {
    const taken = sweeps.filter((sweep) => countedUnit(sweep) === unit).map(temperatureOf);
    return range !== undefined && coversRange(taken, { range, ambient });
  });
  const conforming = results.every(
    ({ verdict }) => verdict === "declared" || (isScoredVerdict(verdict) && complies(verdict, rfq.decisionRule)),
  );
  return {
    verdict: worstVerdict(standings.map(({ verdict }) => verdict)),
    conforming,
    worstLineKey: worst?.lineKey ?? null,
    worstMargin: worst?.margin ?? null,
    worstCreditedMargin: credits.length === 0 ? null : Math.min(...credits),
    units: units.length,
    unitsOverRange: covering.length,
    temperatures: new Set(sweeps.map(temperatureOf)).size,
  };
}

const isScoredVerdict = (verdict: string): verdict is Verdict => verdictRank(verdict as Verdict) >= 0;

type Summary = ReturnType<typeof summarise>;

/** Once a version, however often it is scored. */
async function queueMails(
  subject: Subject,
  summary: Summary,
  results: ReturnType<typeof resultLines>,
  now: Date,
  transaction: Transaction,
): Promise<void> {
  const { version, quote, rfq } = subject;
  const keys = { supplier: `quote-received-supplier:${version.id}`, buyer: `quote-received-buyer:${version.id}` };
  if ((await OutboxEmail.count({ where: { eventKey: keys.supplier }, transaction })) > 0) return;
  const system = { actor: SYSTEM, transaction, rejectOnEmpty: true } as const;
  const submitter = await User.findByPk(version.submittedBy, system);
  const owner = await User.findByPk(rfq.ownerId, system);
  const invitation = await Invitation.findByPk(quote.invitationId, system);
  // By the buyer's directory, as on every page: what a supplier calls itself may be another's name.
  const supplier = await Supplier.findByPk(invitation.supplierId, system);
  const buyer = await Organisation.findByPk(quote.buyerOrganisationId, system);
  const shared = {
    rfqNumber: rfqNumber(rfq.year, rfq.number),
    rfqTitle: rfq.title,
    version: version.number,
    submittedAt: version.submittedAt.toISOString(),
    dueAt: rfq.dueAt.toISOString(),
    dueZone: rfq.dueZone,
    outcome: outcomeWords(summary, rfq.decisionRule, results),
    results,
  };
  const { appUrl } = config();
  const receipt = receiptOf(version.contentHash);
  const supplierLink = `${appUrl}/supplier/quotes/${quote.publicId}/results`;
  const supplierProps = { ...shared, buyerName: buyer.name, receipt, link: supplierLink };
  await queueMail(
    { template: "quote-received-supplier", props: supplierProps },
    submitter,
    keys.supplier,
    now,
    transaction,
  );
  const buyerProps = { ...shared, supplierName: supplier.name, link: `${appUrl}/quotes/${quote.publicId}` };
  await queueMail({ template: "quote-received-buyer", props: buyerProps }, owner, keys.buyer, now, transaction);
  const detail = {
    version: version.number,
    verdict: summary.verdict,
    conforming: summary.conforming,
    coreVersion: CORE_VERSION,
  };
  const about = { ...tenantsOf(version), rfqId: rfq.id, quoteId: quote.id };
  await recordEvent(null, now, { subject: "quote", action: "scored", ...about, detail }, transaction);
}

/** "fail; does not comply under simple acceptance", with the lines an exception is taken to. */
function outcomeWords(summary: Summary, rule: Rfq["decisionRule"], results: ReturnType<typeof resultLines>): string {
  const exceptions = results.filter(({ verdict }) => verdict === "exception").map(({ line }) => line);
  const taken = exceptions.length === 0 ? "" : `; exception to ${exceptions.join(", ")}`;
  const outcome = summary.conforming ? "complies" : "does not comply";
  return `${summary.verdict.replaceAll("-", " ")}; ${outcome} under ${rule} acceptance${taken}`;
}
