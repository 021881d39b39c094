// One requirement as it is typed: kind, band, limit, and beneath them what its kind adds and how it reads.
import { X } from "lucide-react";
import { useState, type ReactNode } from "react";
import type { FieldErrors } from "~/forms/form";
import { LINE_KINDS, toDefinition } from "~/forms/specification";
import {
  isBlank,
  kindOf,
  LINE_FIELDS,
  TEXT_FIELDS,
  type SpecificationLineKind,
  type TextField,
} from "~/forms/specification-line-kinds";
import { Button } from "./button";
import { EntryCell, EntryChoice, EntryErrors } from "./entry-cell";
import { describeDefinition, kindName } from "./requirement-words";
import type { ReadRow } from "./specification-rows";

interface LineFieldsProps {
  row: ReadRow;
  /** What is wrong with the entries as they stand now: an answer's errors are shown as long as they hold. */
  liveErrors: FieldErrors;
  onChange: (field: string, value: string) => void;
  onRemove: () => void;
}

/** The grid of heads and rows from 720 px on; below that every field has its caption. */
const columns =
  "grid grid-cols-2 gap-x-1.5 gap-y-1 tablet:grid-cols-[36px_minmax(0,1.35fr)_minmax(0,1fr)_minmax(0,1fr)_minmax(0,0.85fr)_minmax(0,0.85fr)_36px]";

export function LineHeads() {
  return (
    <div
      aria-hidden
      className={`${columns} border-b-[1.5px] border-ink pb-2 text-12 text-quiet max-tablet:hidden [&>span]:pl-2`}
    >
      <b className="font-normal">Line</b>
      <span>Requirement</span>
      <span>From, MHz</span>
      <span>To, MHz</span>
      <span>Limit</span>
      <span>At upper edge</span>
    </div>
  );
}

export function LineFields({ row, liveErrors, onChange, onRemove }: LineFieldsProps) {
  const { index, fields, lineNumber } = row;
  const kind = kindOf(fields);
  const prefix = `lines.${index}.`;
  return (
    <fieldset className={`${columns} min-w-0 border-b border-rule py-1.5`}>
      <legend className="sr-only">{lineNumber === "" ? "New line" : `Line ${lineNumber}`}</legend>
      <input type="hidden" name={`${prefix}lineKey`} value={fields.lineKey ?? ""} />
      <b className="self-end py-2 text-13 max-tablet:-order-1">
        {lineNumber === "" ? <span className="text-quiet">–</span> : lineNumber}
      </b>
      <EntryChoice
        name={`${prefix}kind`}
        label="Requirement"
        value={fields.kind ?? ""}
        options={kindOptions}
        liveErrors={liveErrors}
        onChange={(value) => onChange("kind", value)}
        className="self-end max-tablet:col-span-2"
      />
      <MainCells {...{ row, liveErrors, onChange, kind }} />
      <button
        name="intent"
        value={`remove-line.${index}`}
        aria-label={lineNumber === "" ? "Remove new line" : `Remove line ${lineNumber}`}
        title="Remove line"
        onClick={(event) => {
          event.preventDefault();
          onRemove();
        }}
        className="grid size-9 place-items-center self-end justify-self-end text-quiet hover:text-fail max-tablet:-order-1 pointer-coarse:size-11"
      >
        <X size={20} strokeWidth={1.75} aria-hidden />
      </button>
      <EntryErrors
        names={["kind", ...mainOf(kind).map(({ field }) => field)].map((field) => prefix + field)}
        liveErrors={liveErrors}
        className={underFields}
      />
      {kind === undefined ? (
        <KindButton className={underFields} />
      ) : (
        <Conditions {...{ row, liveErrors, onChange, kind }} />
      )}
      <Echo row={row} />
    </fieldset>
  );
}

const kindOptions = [
  { value: "", label: "Choose" },
  ...LINE_KINDS.map((kind) => ({ value: kind, label: kindName(kind) })),
];
const temperatureOptions = [
  { value: "", label: "as specified" },
  { value: "ambient", label: "at ambient" },
  { value: "range", label: "over temperature" },
];
const portOptions = [
  { value: "1", label: "1" },
  { value: "2", label: "2" },
];

interface MainCell {
  readonly field: TextField;
  readonly label: string;
  readonly unit?: string;
  /** The table's head does not say what it is. */
  readonly isOwn?: boolean;
  readonly className?: string;
}

const EDGES: readonly MainCell[] = [
  { field: "from", label: "From, MHz" },
  { field: "to", label: "To, MHz" },
];
const LEVELS: readonly MainCell[] = [
  ...EDGES,
  { field: "limit", label: "Limit", unit: "dB" },
  { field: "limitEnd", label: "At upper edge", unit: "dB" },
];
const limitIn = (unit: string): readonly MainCell[] => [...EDGES, { field: "limit", label: "Limit", unit }];
const own = (field: TextField, label: string, unit?: string): MainCell => ({
  field,
  label,
  isOwn: true,
  ...(unit === undefined ? {} : { unit }),
});

/** What stands in a row's first line, after the kind: four columns. */
const MAIN: Readonly<Record<SpecificationLineKind, readonly MainCell[]>> = {
  "insertion-loss": LEVELS,
  ripple: limitIn("dB"),
  "centre-frequency": [
    own("nominal", "Nominal", "MHz"),
    own("limit", "Tolerance, ±", "MHz"),
    own("level", "Below the peak", "dB"),
  ],
  bandwidth: [own("least", "Min", "MHz"), own("largest", "Max", "MHz"), own("level", "Below the peak", "dB")],
  rejection: LEVELS,
  "reverse-isolation": LEVELS,
  "shape-factor": [own("level", "First level", "dB"), own("levelEnd", "Second level", "dB"), own("limit", "Max ratio")],
  "return-loss": LEVELS,
  "group-delay": limitIn("ns"),
  "group-delay-variation": limitIn("ns"),
  "phase-linearity": limitIn("°"),
  declared: [
    { field: "name", label: "What is declared", isOwn: true, className: "col-span-2" },
    { field: "limit", label: "Limit in words", isOwn: true, className: "col-span-2" },
  ],
};

const mainOf = (kind: SpecificationLineKind | undefined) => (kind === undefined ? LEVELS : MAIN[kind]);
const COLUMNS = 4;

type PartProps<Kind> = Pick<LineFieldsProps, "row" | "liveErrors" | "onChange"> & { kind: Kind };

function MainCells({ row, liveErrors, onChange, kind }: PartProps<SpecificationLineKind | undefined>) {
  const cells = mainOf(kind);
  const empty = kind === "declared" ? 0 : COLUMNS - cells.length;
  return (
    <>
      {cells.map(({ field, label, unit, isOwn = false, className = "" }) => (
        <EntryCell
          key={field}
          name={`lines.${row.index}.${field}`}
          label={label}
          value={row.fields[field] ?? ""}
          liveErrors={liveErrors}
          onChange={(value) => onChange(field, value)}
          caption={isOwn ? "over" : "head"}
          className={`self-end ${className}`}
          {...(unit === undefined ? {} : { unit })}
        />
      ))}
      {Array.from({ length: empty }, (_, place) => (
        <span key={place} aria-hidden className="max-tablet:hidden" />
      ))}
    </>
  );
}

const underFields = "col-span-2 tablet:col-span-5 tablet:col-start-2";

const CONDITIONS: readonly TextField[] = ["relativeFrom", "relativeTo", "window", "aperture"];
const RARER: readonly TextField[] = ["withinFrom", "withinTo", "maxStep"];

const FIELD_LABELS: Readonly<Record<TextField | "port" | "temperature", string>> = {
  from: "From, MHz",
  to: "To, MHz",
  limit: "Limit",
  limitEnd: "At upper edge",
  nominal: "Nominal, MHz",
  least: "Min, MHz",
  largest: "Max, MHz",
  level: "Below the peak, dB",
  levelEnd: "Second level, dB",
  name: "What is declared",
  relativeFrom: "Relative to loss from",
  relativeTo: "Relative to loss to, MHz",
  withinFrom: "Peak sought from",
  withinTo: "Peak sought to, MHz",
  window: "In any window of, MHz",
  aperture: "Aperture, MHz",
  maxStep: "Largest step, MHz",
  port: "Port",
  temperature: "Temperature",
};

function Conditions({ row, liveErrors, onChange, kind }: PartProps<SpecificationLineKind>) {
  const { fields, index } = row;
  const taken = LINE_FIELDS[kind];
  const entry = (field: keyof typeof FIELD_LABELS) => ({
    name: `lines.${index}.${field}`,
    label: FIELD_LABELS[field],
    value: fields[field] ?? "",
    liveErrors,
    onChange: (value: string) => onChange(field, value),
    caption: "beside" as const,
  });
  // Text in a field the kind does not take stays in sight: it is refused there, and has to be cleared.
  const strays = TEXT_FIELDS.filter((field) => !taken.includes(field) && !isBlank(fields[field]));
  const cells = (names: readonly TextField[]) =>
    names.filter((field) => taken.includes(field)).map((field) => <EntryCell key={field} {...entry(field)} />);
  return (
    <div className={`${underFields} flex flex-wrap gap-x-5`}>
      {kind === "return-loss" ? <EntryChoice {...entry("port")} options={portOptions} /> : null}
      {cells(CONDITIONS)}
      {kind === "declared" && isBlank(fields.temperature) ? null : (
        <EntryChoice {...entry("temperature")} options={temperatureOptions} />
      )}
      {strays.map((field) => (
        <EntryCell key={field} {...entry(field)} />
      ))}
      {kind === "declared" ? null : (
        <Rarer
          isFilled={RARER.some((field) => !isBlank(fields[field]))}
          isWrong={RARER.some((field) => liveErrors[`lines.${index}.${field}`] !== undefined)}
        >
          {cells(RARER)}
        </Rarer>
      )}
      <KindButton />
    </div>
  );
}

/** Folded away while nothing stands in it; its entries are sent either way. */
function Rarer({ isFilled, isWrong, children }: { isFilled: boolean; isWrong: boolean; children: ReactNode }) {
  const [isOpen, setOpen] = useState(isFilled);
  return (
    <details
      open={isOpen || isWrong}
      onToggle={(event) => setOpen(event.currentTarget.open)}
      className="pl-2 open:basis-full"
    >
      <summary className="w-fit py-2.5 text-12 text-signal pointer-coarse:py-3.5">More</summary>
      <div className="flex flex-wrap gap-x-5 [&>*]:-ml-2">{children}</div>
    </details>
  );
}

/** Without script a changed kind shows its fields when the page is drawn again. */
function KindButton({ className = "" }: { className?: string }) {
  return (
    <noscript className={className}>
      <Button kind="plain" name="intent" value="show-fields">
        Show the fields of this kind
      </Button>
    </noscript>
  );
}

/** How the row is understood, in the words of the requirement table. */
function Echo({ row }: { row: ReadRow }) {
  if (!row.requirement || row.requirement.kind === "declared") return null;
  const { band, limit } = describeDefinition(toDefinition(row.requirement).definition);
  return (
    <p className={`${underFields} pb-1 pl-2 text-12 text-quiet`}>
      = {limit}
      {band === "" ? "" : `, ${band}`}
    </p>
  );
}
