// What an RFQ asks for, as its overview shows it: text, quantities, measured data, assumed setup.
import type { ReactNode } from "react";
import type { MeasurementPlan } from "~/rf/measurement-plan";
import { Cell, Row, RowHead, Table } from "./data-table";
import { FactLines } from "./fact-lines";
import { DueDate, Instant } from "./figure";
import { formatNumber } from "./format";
import { COVERAGE_SENTENCE, planFacts } from "./measurement-plan-words";
import { Section, Split } from "./page";
import type { RfqBlockHead } from "./rfq-block";

export interface RfqTermsData {
  readonly text: string | null;
  readonly breaks: readonly number[];
  readonly unitsAsked: number;
  readonly unitsOverRange: number;
  readonly measurementPlan: MeasurementPlan;
  /** Hz; of the specification. */
  readonly lowestTestFrequency: number | null;
  /** Label and figure with its unit. */
  readonly assumedSetup: readonly (readonly [label: string, figure: string])[];
  readonly temperatureRange: readonly [number, number] | null;
  readonly ambient: number;
  readonly createdAt: string;
  readonly openedAt: string | null;
  readonly closedAt: string | null;
  readonly now: string;
}

const RULES = {
  simple: "simple acceptance: pass and conditional pass comply",
  guarded: "guarded acceptance: pass alone complies",
};

const celsius = (value: number): string => formatNumber(value, Number.isInteger(value) ? 0 : 1);

export function RfqTerms({ head, terms }: { head: RfqBlockHead; terms: RfqTermsData }) {
  return (
    <Split>
      <div className="min-w-0">
        <Section title="What is asked">
          <Facts label="What is asked" rows={asked(head, terms)} />
        </Section>
        <Section
          title="Measurement plan"
          note={terms.measurementPlan.sweeps === undefined ? undefined : COVERAGE_SENTENCE}
        >
          <Facts label="Measurement plan" rows={planned(terms)} />
        </Section>
        <Section title="Text to the suppliers">
          {terms.text === null ? (
            <p className="text-13 text-quiet">None.</p>
          ) : (
            <p className="max-w-170 whitespace-pre-line">{terms.text}</p>
          )}
        </Section>
      </div>
      <Section title="Assumed setup" note="Takes the place of what a supplier does not state.">
        <Facts label="Assumed setup" rows={terms.assumedSetup} figures />
      </Section>
    </Split>
  );
}

type FactRow = readonly [label: string, value: ReactNode];

function asked(head: RfqBlockHead, terms: RfqTermsData): FactRow[] {
  const { dueZone } = head;
  const instant = (at: string) => <Instant at={at} zone={dueZone} />;
  return [
    ["Unit price at", terms.breaks.map((quantity) => formatNumber(quantity, 0)).join(" · ")],
    ["Compared at", `${formatNumber(head.quantity, 0)} pieces, in ${head.currency}`],
    ["Decision rule", RULES[head.decisionRule]],
    ["Quotes due", <DueDate key="due" at={head.dueAt} zone={dueZone} now={terms.now} state={head.state} />],
    ["Written", instant(terms.createdAt)],
    ...(terms.openedAt === null ? [] : [["Opened", instant(terms.openedAt)] as const]),
    ...(terms.closedAt === null ? [] : [["Closed", instant(terms.closedAt)] as const]),
  ];
}

function planned(terms: RfqTermsData): FactRow[] {
  const { temperatureRange: range, unitsOverRange, ambient } = terms;
  return [
    ["Units measured", `${terms.unitsAsked} in all`],
    [
      "Over temperature",
      range === null
        ? `ambient ${celsius(ambient)} °C only: the specification gives no range`
        : `${unitsOverRange} at ${celsius(ambient)} °C and at both ends of ${celsius(range[0])} to ${celsius(range[1])} °C`,
    ],
    ...planFacts(terms.measurementPlan, terms.lowestTestFrequency).map(([label, lines]): FactRow => [
      label,
      <FactLines key={label} lines={lines} />,
    ]),
  ];
}

function Facts({ label, rows, figures = false }: { label: string; rows: readonly FactRow[]; figures?: boolean }) {
  return (
    <Table label={label} className="border-t-[1.5px] border-ink">
      <tbody>
        {rows.map(([name, value]) => (
          <Row key={name}>
            <RowHead className={`font-normal! text-quiet ${figures ? "" : "w-44"}`}>{name}</RowHead>
            <Cell figure={figures}>{value}</Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}
