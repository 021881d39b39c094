// Cells of a measured file's row: what the reader noted, range and steps, worst line, and the fields of a file without a place.
import { href, useFetcher } from "react-router";
import { formValues } from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { temperatureText } from "~/forms/measurement";
import { isMeasured, type Verdict as MeasuredVerdict } from "~/rf/index";
import { TwoLines } from "./data-table";
import { FieldError } from "./field-error";
import { formatBand, formatFrequency, formatMargin, formatNumber } from "./format";
import type { MeasuredFile } from "./measurement-groups";
import { requirementUnit } from "./requirement-words";
import { setupWords } from "./setup-words";
import { Verdict, verdictColour } from "./verdict-mark";

export function FileNotes({ file: { notes, setup } }: { file: MeasuredFile }) {
  return (
    <>
      {setup === null ? null : (
        <span className="block max-w-110 py-1 text-12 font-normal text-quiet">Own setup: {setupWords(setup)}</span>
      )}
      {notes.length === 0 ? null : (
        <details className="text-12 font-normal text-quiet">
          <summary className="inline-block min-h-6 py-1">
            {notes.length === 1 ? "1 note" : `${notes.length} notes`}
          </summary>
          <ul className="max-w-110 pb-1">
            {notes.map(({ message }, index) => (
              <li key={index}>{message}</li>
            ))}
          </ul>
        </details>
      )}
    </>
  );
}

/** Range over points and step; of steps that differ, finest and widest. */
export function SweepWords({ file: { sweep, points, step } }: { file: MeasuredFile }) {
  const count = `${formatNumber(points, 0)} ${points === 1 ? "point" : "points"}`;
  return <TwoLines upper={formatBand(sweep)} lower={step === null ? count : `${count}, ${stepWords(step)}`} />;
}

/** Steps alike to 1 % are one: frequencies in a file are rounded. */
function stepWords([finest, widest]: readonly [number, number]): string {
  const one = shortStep(widest);
  return widest <= 1.01 * finest ? `step ${one}` : `steps ${shortStep(finest)} to ${one}`;
}

/** Four significant digits, without the zeros that follow: "250 kHz". */
function shortStep(hz: number): string {
  const unit = hz >= 1e6 ? "MHz" : hz >= 1e3 ? "kHz" : "Hz";
  const size = hz / { MHz: 1e6, kHz: 1e3, Hz: 1 }[unit];
  return `${Number(size.toPrecision(4))} ${unit}`;
}

export function FileVerdict({ file, scoring }: { file: MeasuredFile; scoring: "done" | "pending" | "failed" }) {
  if (file.verdict !== null) return <CoveredVerdict verdict={file.verdict} coverage={file.coverage} />;
  return <span className="text-quiet">{scoring === "pending" ? "being scored" : "not scored"}</span>;
}

/** The verdict of the lines a file covers by itself, and of how many that is where it is not all. */
export function CoveredVerdict({ verdict, coverage }: Pick<MeasuredFile, "coverage"> & { verdict: MeasuredVerdict }) {
  if (!coverage || coverage.lines === 0 || coverage.lines === coverage.of) return <Verdict verdict={verdict} />;
  return <TwoLines upper={<Verdict verdict={verdict} />} lower={`${coverage.lines} of ${coverage.of} lines covered`} />;
}

export function WorstLine({ file: { worst, verdict } }: { file: MeasuredFile }) {
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

interface LabelAnswer {
  readonly errors: FieldErrors;
}

interface LabelFieldsProps {
  file: MeasuredFile;
  /** Id of the form that posts them without script. */
  form: string;
  /** Of that post, by `serial.<id>` and `temperature.<id>`. */
  errors: FieldErrors;
}

/** Unit and temperature of a file that lacks one of them; kept when a field is left. */
export function LabelFields({ file, form, errors }: LabelFieldsProps) {
  const fetcher = useFetcher<LabelAnswer>();
  const { publicId } = file;
  const own: FieldErrors = fetcher.data?.errors ?? {
    serial: errors[`serial.${publicId}`],
    temperature: errors[`temperature.${publicId}`],
  };
  const save = ({ form: owner }: HTMLInputElement) => {
    if (!owner) return;
    const { [`serial.${publicId}`]: serial = "", [`temperature.${publicId}`]: temperature = "" } = formValues(
      new FormData(owner),
    );
    if (serial === (file.serial ?? "") && temperature === temperatureText(file.temperature)) return;
    const action = href("/api/v1/measurements/:measurementId", { measurementId: publicId });
    void fetcher.submit({ intent: "label", serial, temperature }, { method: "post", action });
  };
  const shared = { file, form, save, isBusy: fetcher.state !== "idle", errors: own };
  return (
    <>
      <span className="flex gap-2 py-1">
        <LabelField {...shared} name="serial" label="Unit" value={file.serial ?? ""} />
        <LabelField {...shared} name="temperature" label="Temperature" value={temperatureText(file.temperature)} />
      </span>
      {(["serial", "temperature", "form"] as const).map((name) => (
        <FieldError key={name} id={`${name}-${publicId}-error`}>
          {own[name]?.join(" ")}
        </FieldError>
      ))}
    </>
  );
}

interface LabelFieldProps extends LabelFieldsProps {
  name: "serial" | "temperature";
  label: string;
  value: string;
  isBusy: boolean;
  save: (input: HTMLInputElement) => void;
}

/** One that is missing stands out. */
function LabelField({ file, form, errors, name, label, value, isBusy, save }: LabelFieldProps) {
  const id = `${name}-${file.publicId}`;
  const isWrong = errors[name] !== undefined;
  return (
    <input
      // A value the server has read anew is shown as it was read.
      key={value}
      id={id}
      form={form}
      name={`${name}.${file.publicId}`}
      aria-label={`${label} of ${file.fileName}`}
      aria-invalid={isWrong || undefined}
      aria-describedby={isWrong ? `${id}-error` : undefined}
      aria-busy={isBusy || undefined}
      defaultValue={value}
      placeholder={name === "serial" ? "unit, serial" : "°C"}
      autoComplete="off"
      inputMode={name === "serial" ? "text" : "decimal"}
      onBlur={(event) => save(event.currentTarget)}
      onKeyDown={(event) => {
        if (event.key !== "Enter") return;
        event.preventDefault();
        save(event.currentTarget);
      }}
      className={`h-9 min-w-0 rounded-field border bg-leaf px-2 text-13 font-normal pointer-coarse:h-11 ${isWrong ? "border-fail" : value === "" ? "border-near" : "border-edge"} ${name === "serial" ? "w-36" : "w-22 text-right tabular-nums"}`}
    />
  );
}
