// The files of a quote: unit and temperature edited in place, what the reader noted, and how each scores by itself.
import { useRef, useSyncExternalStore, type Ref } from "react";
import { href, useFetcher } from "react-router";
import type { FieldErrors } from "~/forms/form";
import { temperatureText } from "~/forms/measurement";
import { isMeasured, type RequirementDefinition, type Verdict as MeasuredVerdict } from "~/rf/index";
import { Button } from "./button";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "./data-table";
import { FieldError } from "./field-error";
import { PostForm } from "./form";
import { formatBand, formatFrequency, formatMargin, formatNumber } from "./format";
import { requirementUnit } from "./requirement-words";
import { Verdict, verdictColour } from "./verdict-mark";

/** A row of `listMeasurements`. */
export interface UploadedFile {
  readonly publicId: string;
  readonly fileId: string;
  readonly fileName: string;
  readonly size: number;
  readonly serial: string | null;
  readonly temperature: string | null;
  readonly points: number;
  readonly sweep: readonly [number, number];
  readonly notes: readonly { readonly severity: "repaired" | "doubtful"; readonly message: string }[];
  readonly verdict: MeasuredVerdict | null;
  readonly worst: {
    readonly lineNumber: string;
    readonly definition: RequirementDefinition;
    readonly margin: number | null;
    readonly frequency: number | null;
  } | null;
}

interface UploadListProps {
  entries: readonly UploadedFile[];
  canEdit: boolean;
  /** Of a post without script, by `serial.<id>` and `temperature.<id>`. */
  errors?: FieldErrors | undefined;
}

export function UploadList({ entries, canEdit, errors = {} }: UploadListProps) {
  return (
    <PostForm aria-label="Units and temperatures">
      {/* What Enter presses in a field: never a Remove. */}
      <button name="intent" value="labels" hidden tabIndex={-1} />
      <noscript>
        <Button name="intent" value="labels" className="mb-3">
          Save units and temperatures
        </Button>
      </noscript>
      <Table label="Measured files" rows="two-line" stacks>
        <thead>
          <tr>
            <HeadCell>File</HeadCell>
            <HeadCell className="w-44">Unit, serial</HeadCell>
            <HeadCell figure className="w-40">
              Temperature, °C
            </HeadCell>
            <HeadCell figure>Sweep</HeadCell>
            <HeadCell className="pl-6">Verdict of this file</HeadCell>
            <HeadCell>Worst line, margin</HeadCell>
            <HeadCell>
              <span className="sr-only">Remove</span>
            </HeadCell>
          </tr>
        </thead>
        <tbody>
          {entries.map((entry) => (
            <FileRow key={entry.publicId} entry={entry} canEdit={canEdit} errors={errors} />
          ))}
        </tbody>
      </Table>
    </PostForm>
  );
}

interface Answer {
  readonly ok: boolean;
  readonly errors: FieldErrors;
}

function FileRow({ entry, canEdit, errors }: { entry: UploadedFile; canEdit: boolean; errors: FieldErrors }) {
  const fetcher = useFetcher<Answer>();
  const serial = useRef<HTMLInputElement>(null);
  const temperature = useRef<HTMLInputElement>(null);
  const action = href("/api/v1/measurements/:measurementId", { measurementId: entry.publicId });
  const own: FieldErrors = fetcher.data?.errors ?? {
    serial: errors[`serial.${entry.publicId}`],
    temperature: errors[`temperature.${entry.publicId}`],
  };
  const save = () => {
    const values = { serial: serial.current?.value ?? "", temperature: temperature.current?.value ?? "" };
    const isSame = values.serial === (entry.serial ?? "") && values.temperature === temperatureText(entry.temperature);
    if (!isSame) void fetcher.submit({ intent: "label", ...values }, { method: "post", action });
  };
  const shared = { entry, canEdit, onSave: save, isBusy: fetcher.state !== "idle" };
  return (
    <Row className={fetcher.formData?.get("intent") === "remove" ? "opacity-50" : ""}>
      <RowHead className="tablet:min-w-44 tablet:py-1.5">
        <a href={href("/files/:fileId", { fileId: entry.fileId })} className="break-all">
          {entry.fileName}
        </a>
        <Notes notes={entry.notes} />
        {own.form ? <FieldError id={`form-${entry.publicId}`}>{own.form.join(" ")}</FieldError> : null}
      </RowHead>
      <Cell className="max-tablet:order-2 tablet:py-1" data-label="Unit, serial">
        <LabelField {...shared} ref={serial} name="serial" label="Unit" value={entry.serial ?? ""} error={own.serial} />
      </Cell>
      <Cell className="max-tablet:order-3 max-tablet:w-34! tablet:py-1" data-label="Temperature, °C">
        <LabelField
          {...shared}
          ref={temperature}
          name="temperature"
          label="Temperature"
          value={temperatureText(entry.temperature)}
          error={own.temperature}
          figure
        />
      </Cell>
      <Cell figure className="max-tablet:order-4 max-tablet:text-left! tablet:py-1.5" data-label="Sweep">
        <TwoLines upper={formatBand(entry.sweep)} lower={`${formatNumber(entry.points, 0)} points`} />
      </Cell>
      <Cell className="max-tablet:order-1 max-tablet:justify-self-end tablet:pl-6">
        {entry.verdict === null ? <span className="text-quiet">not scored</span> : <Verdict verdict={entry.verdict} />}
      </Cell>
      <Cell className="max-tablet:order-5 max-tablet:w-34! tablet:py-1.5" data-label="Worst line, margin">
        <WorstLine entry={entry} />
      </Cell>
      <Cell className="text-right max-tablet:order-6 max-tablet:col-span-2">
        {canEdit ? (
          <RemoveButton
            entry={entry}
            onRemove={() => void fetcher.submit({ intent: "remove" }, { method: "post", action })}
          />
        ) : null}
      </Cell>
    </Row>
  );
}

function Notes({ notes }: Pick<UploadedFile, "notes">) {
  if (notes.length === 0) return null;
  return (
    <details className="text-12 font-normal text-quiet">
      <summary className="inline-block min-h-6 py-1">{notes.length === 1 ? "1 note" : `${notes.length} notes`}</summary>
      <ul className="max-w-110 pb-1">
        {notes.map(({ message }, index) => (
          <li key={index}>{message}</li>
        ))}
      </ul>
    </details>
  );
}

interface LabelFieldProps {
  ref: Ref<HTMLInputElement>;
  entry: UploadedFile;
  canEdit: boolean;
  name: "serial" | "temperature";
  label: string;
  value: string;
  error: string[] | undefined;
  isBusy: boolean;
  figure?: boolean;
  onSave: () => void;
}

/** Borderless until it is pointed at; one that is missing stands out. */
function LabelField({ ref, entry, canEdit, name, label, value, error, isBusy, figure, onSave }: LabelFieldProps) {
  if (!canEdit) return <span className={figure ? "block tabular-nums tablet:text-right" : ""}>{value || "–"}</span>;
  const id = `${name}-${entry.publicId}`;
  const border = error || value === "" ? "border-fail" : "border-transparent hover:border-edge focus:border-edge";
  return (
    <>
      <input
        ref={ref}
        // A value the server has read anew is shown as it was read.
        key={value}
        id={id}
        name={`${name}.${entry.publicId}`}
        aria-label={`${label} of ${entry.fileName}`}
        aria-invalid={error ? true : undefined}
        aria-describedby={error ? `${id}-error` : undefined}
        aria-busy={isBusy || undefined}
        defaultValue={value}
        placeholder={name === "serial" ? "serial" : "°C"}
        autoComplete="off"
        inputMode={name === "serial" ? "text" : "decimal"}
        onBlur={onSave}
        onKeyDown={(event) => {
          if (event.key !== "Enter") return;
          event.preventDefault();
          onSave();
        }}
        className={`h-9 w-full min-w-20 rounded-field border bg-leaf px-2 text-13 ${figure ? "text-right tabular-nums" : ""} ${border}`}
      />
      <FieldError id={`${id}-error`}>{error?.join(" ")}</FieldError>
    </>
  );
}

function WorstLine({ entry: { worst, verdict } }: { entry: UploadedFile }) {
  if (!worst || verdict === null || !isMeasured(worst.definition)) return <span className="text-quiet">–</span>;
  const { unit, scale } = requirementUnit(worst.definition.kind);
  const margin = worst.margin === null ? "–" : `${formatMargin(worst.margin * scale)} ${unit}`;
  const place = worst.frequency === null ? "" : `at ${formatFrequency(worst.frequency)}`;
  const colour = verdict === "pass" ? "" : `font-semibold ${verdictColour(verdict)}`;
  return (
    <TwoLines
      upper={
        <span className="whitespace-nowrap">
          {worst.lineNumber} <span className={`ml-1.5 tabular-nums ${colour}`}>{margin}</span>
        </span>
      }
      lower={place}
    />
  );
}

const noSubscription = () => () => undefined;

/** Posts the form around it until script takes over. */
function RemoveButton({ entry, onRemove }: { entry: UploadedFile; onRemove: () => void }) {
  const isScripted = useSyncExternalStore(
    noSubscription,
    () => true,
    () => false,
  );
  const press = isScripted ? { type: "button" as const, onClick: onRemove } : {};
  return (
    <Button
      {...press}
      kind="plain"
      name="intent"
      value={`remove:${entry.publicId}`}
      aria-label={`Remove ${entry.fileName}`}
    >
      Remove
    </Button>
  );
}
