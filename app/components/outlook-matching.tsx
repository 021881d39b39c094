// Unit matching: what to compare, chosen in the address, and how far the units differ.
import type { ReactNode } from "react";
import { Form } from "react-router";
import { OutlookMatching, OutlookMatchingKey, type MatchingCurveView } from "~/charts/outlook-matching";
import type { MatchingPhase } from "~/forms/outlook";
import type { Requirement, Spread, TemperaturePlace } from "~/rf/index";
import { Button } from "./button";
import { celsiusWords } from "./compliance-words";
import { SelectField } from "./field";
import { formatBand, formatLevel, formatNumber } from "./format";
import { Notice } from "./notice";
import { listed } from "./outlook-words";
import { Section } from "./page";
import { kindName } from "./requirement-words";

type Band = readonly [number, number];

export interface MatchingFound {
  readonly kind: "found";
  readonly units: readonly string[];
  readonly copies: readonly string[];
  readonly band: Band;
  readonly level: Spread;
  readonly phase: Spread;
  readonly points: number;
  /** Which of the common frequencies were compared: 1 for each. */
  readonly every: number;
  readonly missing: readonly Band[];
  readonly largestPhaseStep: number;
  readonly curves: readonly MatchingCurveView[];
}

type MatchingResultView =
  | MatchingFound
  | { readonly kind: "none"; readonly reason: "no-passband" | "too-few-units" | "no-common-band" }
  | { readonly kind: "large"; readonly points: number; readonly most: number; readonly mayAsk: boolean };

export interface MatchingProps {
  matching: {
    readonly passbands: readonly {
      readonly lineNumber: string;
      readonly kind: Requirement["kind"];
      readonly band: Band;
    }[];
    readonly places: readonly TemperaturePlace[];
    readonly chosen: { readonly lineNumber: string | null; readonly celsius: number; readonly phase: MatchingPhase };
    readonly result: MatchingResultView;
  };
}

export function MatchingSection({ matching }: MatchingProps) {
  return (
    <Section
      id="matching"
      title="Unit matching"
      note="The largest difference between two units over a passband, at one temperature."
    >
      {matching.chosen.lineNumber === null ? null : <Choice matching={matching} />}
      <MatchingOutcome result={matching.result} phase={matching.chosen.phase} />
    </Section>
  );
}

/** Without script it is a form that gets this page again. */
function Choice({ matching: { passbands, places, chosen } }: MatchingProps) {
  return (
    <Form
      // Fields take their values once: another choice makes new ones.
      key={`${chosen.lineNumber ?? ""} ${chosen.celsius} ${chosen.phase}`}
      method="get"
      action="#matching"
      preventScrollReset
      className="print-hidden mb-6 grid grid-cols-1 items-start gap-3 tablet:grid-cols-[minmax(0,2fr)_minmax(0,1fr)_minmax(0,1.4fr)_auto]"
    >
      <SelectField
        name="line"
        label="Passband of line"
        defaultValue={chosen.lineNumber ?? ""}
        options={passbands.map(({ lineNumber, kind, band }) => ({
          value: lineNumber,
          label: `${lineNumber} ${kindName(kind)}, ${formatBand(band)}`,
        }))}
      />
      <SelectField
        name="temperature"
        label="Temperature"
        defaultValue={String(chosen.celsius)}
        options={places.map(({ celsius, name }) => ({
          value: String(celsius),
          label: `${celsiusWords(celsius)}${name === "ambient" ? ", ambient" : ""}`,
        }))}
      />
      <SelectField
        name="phase"
        label="Phase"
        defaultValue={chosen.phase}
        options={[
          { value: "removed", label: "constant and delay removed" },
          { value: "measured", label: "as measured" },
        ]}
      />
      <Button className="tablet:mt-2">Compare</Button>
    </Form>
  );
}

function MatchingOutcome({ result, phase }: { result: MatchingResultView; phase: MatchingPhase }) {
  if (result.kind === "none") return <Notice>{NONE[result.reason]}</Notice>;
  if (result.kind === "large")
    return (
      <Notice>
        The files at this temperature hold {formatNumber(result.points, 0)} points
        {result.mayAsk
          ? ": they are compared when you press Compare."
          : `; at most ${formatNumber(result.most, 0)} are compared.`}
      </Notice>
    );
  return <Found found={result} phase={phase} />;
}

const NONE: Record<Extract<MatchingResultView, { kind: "none" }>["reason"], string> = {
  "no-passband": "The specification has no line with a passband.",
  "too-few-units": "Only one unit, or one unit's data under several serials, was measured here: two are needed.",
  "no-common-band": "No part of the passband is reached by two units.",
};

function Found({ found, phase }: { found: MatchingFound; phase: MatchingPhase }) {
  const { level, phase: spread, curves, band } = found;
  return (
    <>
      <div className="grid grid-cols-1 gap-x-8 gap-y-5 desktop:grid-cols-[minmax(0,1fr)_400px]">
        <OutlookMatching curves={curves} band={band} level={level} phase={spread} />
        <div className="grid content-start gap-5 tablet:max-desktop:grid-cols-2">
          <Largest title="Largest difference of loss S21" figure={`${formatLevel(level.value)} dB`} spread={level}>
            {level.units[0]} loses more than {level.units[1]}.
          </Largest>
          <Largest
            title={
              phase === "removed"
                ? "Largest difference of phase, constant and delay removed"
                : "Largest difference of phase, as measured"
            }
            figure={`${formatLevel(spread.value, { decimals: 1 })}°`}
            spread={spread}
          >
            {phase === "removed"
              ? "What a length of line and a phase offset cannot take away."
              : "On the circle, at most 180°."}
          </Largest>
          <div className="space-y-1.5 text-13 text-quiet tablet:max-desktop:col-span-2">
            {caveats(found, phase).map((sentence) => (
              <p key={sentence}>{sentence}</p>
            ))}
          </div>
        </div>
      </div>
    </>
  );
}

interface LargestProps {
  title: string;
  figure: string;
  spread: Spread;
  children: ReactNode;
}

function Largest({ title, figure, spread, children }: LargestProps) {
  return (
    <div className="border-t border-edge pt-2">
      <h3 className="text-12 font-normal text-quiet">{title}</h3>
      <p className="text-24 font-bold tabular-nums">{figure}</p>
      <OutlookMatchingKey units={spread.units} frequency={spread.frequency} />
      <p className="mt-1 text-13">{children}</p>
    </div>
  );
}

function caveats(found: MatchingFound, phase: MatchingPhase): string[] {
  const { units, points, every, missing, copies, largestPhaseStep } = found;
  const doubtful = largestPhaseStep > 135;
  const method =
    phase === "removed" ? " From each unit's phase its own least-squares line against frequency is taken first." : "";
  return [
    `${units.length} units, ${listed(units)}, on the ${formatNumber(points, 0)} frequencies that any of them was sampled at, linear in dB and in unwrapped phase between samples.${method}`,
    ...(every === 1 ? [] : [`One frequency in ${every} was compared: between them the differences may be larger.`]),
    ...(missing.length === 0 ? [] : [`Not reached by all: ${missing.map((band) => formatBand(band)).join(", ")}.`]),
    ...(copies.length === 0 ? [] : [`Left out: ${listed(copies)}, with the same data as another unit.`]),
    ...(doubtful
      ? [
          `A phase step of ${formatNumber(largestPhaseStep, 0)}° between neighbouring samples: what is said of phase may be off by whole turns.`,
        ]
      : []),
    "The measurement's uncertainty is not in these figures.",
  ];
}
