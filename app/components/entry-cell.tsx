// Entries in the rows of a table: borderless until hover or focus, the caption in the head or beside the control.
import type { ReactNode } from "react";
import type { FieldErrors } from "~/forms/form";
import { FieldError } from "./field-error";
import { useField } from "./form-state";

export interface EntryProps {
  name: string;
  label: string;
  value: string;
  /** What is wrong with the entries as they stand now: an answer's errors are shown as long as they hold. */
  liveErrors: FieldErrors;
  onChange: (value: string) => void;
  /** "head": the table's head says it, and on phones a caption; "over" and "beside" the control at every width. @default "head" */
  caption?: "head" | "over" | "beside";
  /** At the right in quiet, where rows differ in unit. */
  unit?: string;
  className?: string;
}

const control =
  "h-9 rounded-field border bg-leaf px-2 text-13 text-ink hover:border-edge focus-visible:outline-offset-[-2px]";

/** The wiring of an entry, and its sentence where the answer refused it and it still stands. */
export function useEntry({ name, liveErrors }: Pick<EntryProps, "name" | "liveErrors">) {
  const field = useField(name);
  const error = field.error === undefined ? undefined : liveErrors[name]?.join(" ");
  const attributes = error === undefined ? { id: field.id, name } : field.attributes;
  return { attributes, id: field.id, errorId: field.errorId, error };
}

type FramedProps = EntryProps & { id: string; errorId: string; error: string | undefined; children: ReactNode };

const labels = { head: "pl-2 tablet:sr-only", over: "pl-2", beside: "whitespace-nowrap" };

function Framed(props: FramedProps) {
  const { caption = "head", className = "" } = props;
  return (
    <div className={`min-w-0 ${className}`}>
      <div className={caption === "beside" ? "flex items-center gap-2 pl-2" : ""}>
        <label htmlFor={props.id} className={`block text-12 text-quiet ${labels[caption]}`}>
          {props.label}
        </label>
        {props.children}
      </div>
      {caption === "beside" ? <FieldError id={props.errorId}>{props.error}</FieldError> : null}
    </div>
  );
}

const border = (error: string | undefined) =>
  error === undefined ? "border-transparent" : "border-fail [box-shadow:inset_0_0_0_1px_var(--color-fail)]";

export function EntryCell(props: EntryProps) {
  const { attributes, ...frame } = useEntry(props);
  const width = props.caption === "beside" ? "w-26" : "w-full";
  // A figure that was written with its unit says it itself.
  const unit = /[\p{L}°:]/u.test(props.value) ? undefined : props.unit;
  return (
    <Framed {...props} {...frame}>
      <span className={`relative block ${width}`}>
        <input
          {...attributes}
          type="text"
          value={props.value}
          autoComplete="off"
          onChange={(event) => props.onChange(event.target.value)}
          className={`${control} ${border(frame.error)} w-full tabular-nums ${unit === undefined ? "" : "pr-9"}`}
        />
        {unit === undefined ? null : (
          <span
            aria-hidden
            className="pointer-events-none absolute inset-y-0 right-2 flex items-center text-12 text-quiet"
          >
            {unit}
          </span>
        )}
      </span>
    </Framed>
  );
}

export function EntryChoice(props: EntryProps & { options: readonly { value: string; label: string }[] }) {
  const { attributes, ...frame } = useEntry(props);
  return (
    <Framed {...props} {...frame}>
      <select
        {...attributes}
        value={props.value}
        onChange={(event) => props.onChange(event.target.value)}
        className={`${control} ${border(frame.error)} ${props.caption === "beside" ? "" : "w-full"}`}
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

/** The columns are too narrow for sentences: those of a row's main entries stand under them, over its whole width. */
export function EntryErrors(props: { names: readonly string[]; liveErrors: FieldErrors; className?: string }) {
  return (
    <div className={`pl-2 empty:hidden ${props.className ?? ""}`}>
      {props.names.map((name) => (
        <EntryError key={name} name={name} liveErrors={props.liveErrors} />
      ))}
    </div>
  );
}

function EntryError(props: Pick<EntryProps, "name" | "liveErrors">) {
  const { error, errorId } = useEntry(props);
  return <FieldError id={errorId}>{error}</FieldError>;
}
