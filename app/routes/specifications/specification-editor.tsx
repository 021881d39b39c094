// The form of a draft: title block, requirements typed line by line, and the drawing they make.
import { useDeferredValue, useMemo, useState } from "react";
import { Drawing, wallsFromRequirements } from "~/charts/drawing";
import { Button, LinkButton } from "~/components/button";
import { Empty } from "~/components/empty";
import { Field, PostForm } from "~/components/form";
import { Section } from "~/components/page";
import { shortFrequency } from "~/components/requirement-words";
import { LineFields, LineHeads } from "~/components/specification-line-fields";
import { addLine, readRows, removeLine, withRows } from "~/components/specification-rows";
import type { FormValues } from "~/forms/fields";
import type { FormState } from "~/forms/form";
import { MOST_LINES, parseSpecificationForm, proposeLowestTestFrequency } from "~/forms/specification";
import { parseQuantity, type QuantityOptions } from "~/rf/quantity";

interface SpecificationEditorProps {
  /** As stored, or the first values of a new one. */
  values: FormValues;
  /** What the action sent back. */
  state: FormState | undefined;
  idempotencyKey: string;
  /** Numbers of released revisions by line key. */
  releasedNumbers?: readonly (readonly [string, string])[];
  /** Where leaving leads. */
  backTo: string;
  /** "SPEC-0007 B" */
  name: string;
}

const NONE: readonly (readonly [string, string])[] = [];

export function SpecificationEditor(props: SpecificationEditorProps) {
  const { state, releasedNumbers = NONE } = props;
  const sent = state ? definedValues(state.values) : undefined;
  const [values, setValues] = useState<FormValues>(() => withRows(sent ?? props.values));
  const set = (name: string, value: string) => setValues((current) => ({ ...current, [name]: value }));
  // The text stays ahead of the picture while somebody types.
  const drawn = useDeferredValue(values);
  const released = useMemo(() => new Map(releasedNumbers), [releasedNumbers]);
  const rows = readRows(values, released);
  const live = parseSpecificationForm(values, { released });
  const liveErrors = live.ok ? {} : live.errors;
  const overLockVersion = sent?.overLockVersion;
  return (
    <PostForm
      state={state}
      idempotencyKey={props.idempotencyKey}
      guardsUnsaved
      aria-label="Specification"
      className="mt-6"
    >
      {/* Return in a field presses the first button of a form: saving, not "Remove". */}
      <button name="intent" value="save" tabIndex={-1} aria-hidden className="sr-only" />
      <input type="hidden" name="lockVersion" value={values.lockVersion ?? ""} />
      {overLockVersion === undefined ? null : (
        <>
          <input type="hidden" name="overLockVersion" value={overLockVersion} />
          <Button name="intent" value="save-over" className="mb-6">
            Save mine over the other
          </Button>
        </>
      )}
      <BlockFields values={values} set={set} />
      <div className="grid grid-cols-1 gap-x-8 desktop:grid-cols-[minmax(0,1fr)_minmax(400px,0.72fr)]">
        <Section
          title="Requirements"
          note="Bare figures are MHz, dB and, of delays, ns. 1.92G, DC, 1.5:1 and ±0.25 dB are read too."
        >
          <LineHeads />
          {rows.map((row) => (
            <LineFields
              key={row.index}
              row={row}
              liveErrors={liveErrors}
              onChange={(field, value) => set(`lines.${row.index}.${field}`, value)}
              onRemove={() => setValues((current) => withRows(removeLine(current, row.index)))}
            />
          ))}
          <div className="flex items-center justify-between gap-4 pt-2">
            <Button
              name="intent"
              value="add-line"
              disabled={rows.length >= MOST_LINES}
              onClick={(event) => {
                event.preventDefault();
                setValues(addLine);
              }}
            >
              Add line
            </Button>
          </div>
        </Section>
        <Section title="Drawing">
          <div className="desktop:sticky desktop:top-20">
            <TypedDrawing values={drawn} released={released} title={`Drawing of ${props.name} as typed`} />
          </div>
        </Section>
      </div>
      <div className="sticky bottom-0 z-10 mt-9 flex flex-wrap gap-3 border-t border-edge bg-sheet py-3">
        <Button kind="filled" name="intent" value="save">
          Save draft
        </Button>
        <LinkButton to={props.backTo} kind="plain">
          Leave
        </LinkButton>
      </div>
    </PostForm>
  );
}

const definedValues = (values: FormState["values"]): FormValues =>
  Object.fromEntries(Object.entries(values).flatMap(([name, value]) => (value === undefined ? [] : [[name, value]])));

const ohm = { kind: "impedance", unit: "Ω" } as const;
const celsius = { kind: "temperature", unit: "°C" } as const;
const frequency = { kind: "frequency", unit: "MHz" } as const;

function BlockFields({ values, set }: { values: FormValues; set: (name: string, value: string) => void }) {
  const proposal = proposalWords(values);
  const field = (name: string, label: string, options: QuantityOptions, className: string, hint?: string) => (
    <Field
      name={name}
      label={label}
      className={className}
      autoComplete="off"
      value={values[name] ?? ""}
      onChange={(event) => set(name, event.target.value)}
      {...aside(values[name] ?? "", options)}
      {...(hint === undefined ? {} : { hint })}
    />
  );
  return (
    <div className="grid grid-cols-2 gap-4 tablet:grid-cols-6 desktop:grid-cols-12">
      <Field
        name="title"
        label="Title"
        className="col-span-2 tablet:col-span-6 desktop:col-span-12"
        autoComplete="off"
        value={values.title ?? ""}
        onChange={(event) => set("title", event.target.value)}
      />
      {field("z1", "Impedance, port 1", ohm, "tablet:col-span-3 desktop:col-span-2")}
      {field("z2", "Impedance, port 2", ohm, "tablet:col-span-3 desktop:col-span-2")}
      {field("temperatureFrom", "Temperature from", celsius, "tablet:col-span-2")}
      {field("temperatureTo", "Temperature to", celsius, "tablet:col-span-2")}
      {field("ambient", "Ambient", celsius, "tablet:col-span-2")}
      {field(
        "lowestTestFrequency",
        "Lowest test frequency",
        frequency,
        "tablet:col-span-3 desktop:col-span-2",
        proposal,
      )}
    </div>
  );
}

/** What is usual where a band starts at DC and nothing is given. */
function proposalWords(values: FormValues): string | undefined {
  if ((values.lowestTestFrequency ?? "").trim() !== "") return undefined;
  const requirements = readRows(values).flatMap(({ requirement }) => requirement ?? []);
  const proposal = proposeLowestTestFrequency(requirements);
  return proposal === null ? undefined : `${shortFrequency(proposal)} would be usual.`;
}

/** The echo of an entry that reads otherwise than it is written; else the unit. */
function aside(text: string, options: QuantityOptions): { unit?: string; echo?: string } {
  const unit = options.unit ?? "";
  if (text.trim() === "") return { unit };
  const read = parseQuantity(text, options);
  if (!read.ok) return { unit };
  const isAsWritten = read.echo.slice(2) === text.trim();
  return isAsWritten ? {} : { echo: read.echo };
}

interface TypedDrawingProps {
  values: FormValues;
  released: ReadonlyMap<string, string>;
  title: string;
}

function TypedDrawing({ values, released, title }: TypedDrawingProps) {
  const walls = useMemo(() => {
    const requirements = readRows(values, released).flatMap(({ requirement, lineNumber }) =>
      requirement && requirement.kind !== "declared" ? [{ ...requirement, lineNumber }] : [],
    );
    return wallsFromRequirements(requirements);
  }, [values, released]);
  if (walls.length === 0) return <Empty sentence="Walls appear here as soon as a line has its band and its limit." />;
  return <Drawing walls={walls} title={title} />;
}

/** Values of a new specification. */
export function firstValues(rowCount: number): FormValues {
  const block = { title: "", z1: "50 Ω", z2: "50 Ω", temperatureFrom: "", temperatureTo: "", ambient: "25 °C" };
  return withRows({ ...block, lowestTestFrequency: "" }, rowCount);
}
