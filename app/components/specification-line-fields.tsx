// One requirement as it is typed: kind, band, limit, and beneath them what its kind adds and how it reads.
import { X } from "lucide-react";
import type { ReactNode } from "react";
import type { FormValues } from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { LINE_KINDS, toDefinition, type SpecificationLineKind } from "~/forms/specification";
import { FieldError } from "./field-error";
import { useField } from "./form-state";
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
      <span>Limit, dB</span>
      <span>At upper edge, dB</span>
    </div>
  );
}

export function LineFields({ row, liveErrors, onChange, onRemove }: LineFieldsProps) {
  const { index, fields, lineNumber } = row;
  const kind = LINE_KINDS.find((offered) => offered === fields.kind);
  const prefix = `lines.${index}.`;
  const cell = (field: string, label: string, className = "") => (
    <Cell
      name={prefix + field}
      label={label}
      value={fields[field] ?? ""}
      liveErrors={liveErrors}
      onChange={(value) => onChange(field, value)}
      className={className}
    />
  );
  return (
    <fieldset className={`${columns} min-w-0 border-b border-rule py-1.5`}>
      <legend className="sr-only">{lineNumber === "" ? "New line" : `Line ${lineNumber}`}</legend>
      <input type="hidden" name={`${prefix}lineKey`} value={fields.lineKey ?? ""} />
      <b className="self-start py-2 text-13 max-tablet:-order-1">
        {lineNumber === "" ? <span className="text-quiet">–</span> : lineNumber}
      </b>
      <Choice
        name={`${prefix}kind`}
        label="Requirement"
        value={fields.kind ?? ""}
        options={kindOptions}
        liveErrors={liveErrors}
        onChange={(value) => onChange("kind", value)}
        className="max-tablet:col-span-2"
      />
      {kind === "declared" ? (
        <>
          {cell("name", "What is declared", "col-span-2")}
          {cell("limit", "Limit in words", "col-span-2")}
        </>
      ) : (
        <>
          {cell("from", "From, MHz")}
          {cell("to", "To, MHz")}
          {cell("limit", "Limit, dB")}
          {takes(kind, fields, "limitEnd") ? cell("limitEnd", "At upper edge, dB") : <span aria-hidden />}
        </>
      )}
      <button
        name="intent"
        value={`remove-line.${index}`}
        aria-label={lineNumber === "" ? "Remove new line" : `Remove line ${lineNumber}`}
        title="Remove line"
        onClick={(event) => {
          event.preventDefault();
          onRemove();
        }}
        className="grid size-9 place-items-center justify-self-end text-quiet hover:text-fail max-tablet:-order-1 pointer-coarse:size-11"
      >
        <X size={20} strokeWidth={1.75} aria-hidden />
      </button>
      <RowErrors index={index} liveErrors={liveErrors} />
      <Conditions {...{ row, liveErrors, onChange, kind }} />
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

const TAKEN: Record<SpecificationLineKind, readonly string[]> = {
  "insertion-loss": ["limitEnd", "temperature"],
  ripple: ["window", "temperature"],
  rejection: ["limitEnd", "relativeFrom", "relativeTo", "temperature"],
  "reverse-isolation": ["limitEnd", "temperature"],
  "return-loss": ["limitEnd", "port", "temperature"],
  declared: [],
};

/** Text in a field the kind does not take stays in sight: it is refused there, and has to be cleared. */
const takes = (kind: SpecificationLineKind | undefined, fields: FormValues, field: string): boolean =>
  kind === undefined || TAKEN[kind].includes(field) || (fields[field] ?? "").trim() !== "";

const underFields = "col-span-2 tablet:col-span-5 tablet:col-start-2";

function Conditions(
  props: Pick<LineFieldsProps, "row" | "liveErrors" | "onChange"> & { kind?: SpecificationLineKind },
) {
  const { row, liveErrors, onChange, kind } = props;
  const { fields, index } = row;
  const shown = (field: string) => takes(kind, fields, field);
  const common = (field: string) => ({
    name: `lines.${index}.${field}`,
    value: fields[field] ?? "",
    liveErrors,
    onChange: (value: string) => onChange(field, value),
    inline: true,
  });
  const parts = (
    <div className={`${underFields} flex flex-wrap gap-x-5`}>
      {shown("port") && kind !== "declared" && <Choice {...common("port")} label="Port" options={portOptions} />}
      {shown("relativeFrom") || shown("relativeTo") ? (
        <>
          <Cell {...common("relativeFrom")} label="Relative to loss from" />
          <Cell {...common("relativeTo")} label="to, MHz" />
        </>
      ) : null}
      {shown("window") && <Cell {...common("window")} label="In any window of, MHz" />}
      {shown("temperature") && <Choice {...common("temperature")} label="Temperature" options={temperatureOptions} />}
      {kind !== "declared" && shown("name") && (fields.name ?? "") !== "" && <Cell {...common("name")} label="Name" />}
    </div>
  );
  // A row without a kind shows what kinds add only to a reader without script, who cannot see it appear.
  if (kind !== undefined) return parts;
  return <noscript className={underFields}>{parts}</noscript>;
}

/** The columns are too narrow for sentences: those of the main fields stand under them, over the row's whole width. */
const MAIN_FIELDS = ["kind", "name", "from", "to", "limit", "limitEnd"] as const;

function RowErrors({ index, liveErrors }: { index: number; liveErrors: FieldErrors }) {
  return (
    <div className={`${underFields} pl-2 empty:hidden`}>
      {MAIN_FIELDS.map((field) => (
        <MainError key={field} name={`lines.${index}.${field}`} liveErrors={liveErrors} />
      ))}
    </div>
  );
}

function MainError(props: Pick<ControlProps, "name" | "liveErrors">) {
  const { error, errorId } = useCell(props);
  return <FieldError id={errorId}>{error}</FieldError>;
}

/** How the row is understood, in the words of the requirement table. */
function Echo({ row }: { row: ReadRow }) {
  if (!row.requirement || row.requirement.kind === "declared") return null;
  const { band, limit } = describeDefinition(toDefinition(row.requirement).definition);
  return (
    <p className={`${underFields} pb-1 pl-2 text-12 text-quiet`}>
      = {limit}, {band}
    </p>
  );
}

interface ControlProps {
  name: string;
  label: string;
  value: string;
  liveErrors: FieldErrors;
  onChange: (value: string) => void;
  /** Caption beside the control, at every width. */
  inline?: boolean;
  className?: string;
}

const control =
  "h-9 rounded-field border bg-leaf px-2 text-13 text-ink hover:border-edge focus-visible:outline-offset-[-2px]";

function useCell({ name, liveErrors }: Pick<ControlProps, "name" | "liveErrors">) {
  const field = useField(name);
  const error = field.error === undefined ? undefined : liveErrors[name]?.join(" ");
  const attributes = error === undefined ? { id: field.id, name } : field.attributes;
  return { attributes, id: field.id, errorId: field.errorId, error };
}

function Framed(props: ControlProps & { id: string; errorId: string; error: string | undefined; children: ReactNode }) {
  const { inline = false, className = "" } = props;
  return (
    <div className={`min-w-0 ${className}`}>
      <div className={inline ? "flex items-center gap-2 pl-2" : ""}>
        <label
          htmlFor={props.id}
          className={`block text-12 text-quiet ${inline ? "whitespace-nowrap" : "pl-2 tablet:sr-only"}`}
        >
          {props.label}
        </label>
        {props.children}
      </div>
      {inline ? <FieldError id={props.errorId}>{props.error}</FieldError> : null}
    </div>
  );
}

const border = (error: string | undefined) =>
  error === undefined ? "border-transparent" : "border-fail [box-shadow:inset_0_0_0_1px_var(--color-fail)]";

function Cell(props: ControlProps) {
  const { attributes, ...frame } = useCell(props);
  return (
    <Framed {...props} {...frame}>
      <input
        {...attributes}
        type="text"
        value={props.value}
        autoComplete="off"
        onChange={(event) => props.onChange(event.target.value)}
        className={`${control} ${border(frame.error)} tabular-nums ${props.inline ? "w-26" : "w-full"}`}
      />
    </Framed>
  );
}

function Choice(props: ControlProps & { options: readonly { value: string; label: string }[] }) {
  const { attributes, ...frame } = useCell(props);
  return (
    <Framed {...props} {...frame}>
      <select
        {...attributes}
        value={props.value}
        onChange={(event) => props.onChange(event.target.value)}
        className={`${control} ${border(frame.error)} ${props.inline ? "" : "w-full"}`}
      >
        {props.options.map((option) => (
          <option key={option.value} value={option.value}>
            {option.label}
          </option>
        ))}
      </select>
    </Framed>
  );
}
