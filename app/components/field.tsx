// Fields: cells of the title block one can write in, each with caption, unit or echo, hint and error sentence.
import { ChevronDown } from "lucide-react";
import { useId, type ComponentProps, type ReactNode } from "react";
import { FieldError } from "./field-error";
import { useField } from "./form-state";

interface CellProps {
  label: ReactNode;
  /** Stays at the right in quiet: "GHz", "% of limit". */
  unit?: ReactNode;
  /** What the entry was read as ("= 1.9800 GHz"); takes the unit's place. */
  echo?: ReactNode;
  hint?: ReactNode;
  className?: string;
}

type ControlProps<Tag extends "input" | "select" | "textarea"> = CellProps &
  Omit<ComponentProps<Tag>, "id" | "className" | "name"> & { name: string };

// Padding belongs to label and control, not to the cell between them: the whole cell can be pressed.
const cell =
  "block rounded-field border bg-leaf has-[:focus-visible]:outline-2 has-[:focus-visible]:outline-offset-2 has-[:focus-visible]:outline-signal";
const control =
  "block w-full min-w-0 bg-transparent px-3 pb-1.5 text-15/5.5 text-ink outline-none file:mr-3 file:font-semibold file:text-signal";

const border = (error: string | undefined) =>
  error ? "border-fail [box-shadow:inset_0_0_0_1px_var(--color-fail)]" : "border-edge";

interface FrameProps extends CellProps {
  id: string;
  errorId: string;
  error: string | undefined;
  asideId: string;
  hintId: string;
  children: ReactNode;
}

function Frame(props: FrameProps) {
  const aside = props.echo ?? props.unit;
  return (
    <div className={`min-w-0 ${props.className ?? ""}`}>
      <div className={`${cell} ${border(props.error)}`}>
        <label htmlFor={props.id} className="block px-3 pt-1.5 text-12 text-quiet">
          {props.label}
        </label>
        <div className="flex">
          {props.children}
          {aside === undefined ? null : (
            <span id={props.asideId} className="flex-none pr-3 text-15/5.5 whitespace-nowrap text-quiet">
              {aside}
            </span>
          )}
        </div>
      </div>
      <FieldError id={props.errorId}>{props.error}</FieldError>
      {props.hint === undefined ? null : (
        <p id={props.hintId} className="mt-1 text-12 text-quiet">
          {props.hint}
        </p>
      )}
    </div>
  );
}

/** Id, value and wiring of a control in its frame. */
function useCell(props: CellProps & { name: string }) {
  const own = useId();
  const hasAside = props.unit !== undefined || props.echo !== undefined;
  const asideId = `${own}aside`;
  const hintId = `${own}hint`;
  const described = [hasAside ? asideId : "", props.hint === undefined ? "" : hintId].filter(Boolean).join(" ");
  const field = useField(props.name, described || undefined);
  const frame = { id: field.id, errorId: field.errorId, error: field.error, asideId, hintId };
  return { field, frame };
}

/** An entry of one line: text, number, date, e-mail, password, file. */
export function Field({ label, unit, echo, hint, className, ...input }: ControlProps<"input">) {
  const shared = { label, unit, echo, hint, ...(className === undefined ? {} : { className }) };
  const { field, frame } = useCell({ ...shared, name: input.name });
  // A password is never sent back, and a file cannot be.
  const kept = input.type === "password" || input.type === "file" ? undefined : field.value;
  const value = input.value === undefined ? { defaultValue: kept ?? input.defaultValue } : {};
  return (
    <Frame {...shared} {...frame}>
      <input type="text" {...input} {...value} {...field.attributes} className={`${control} h-7`} />
    </Frame>
  );
}

interface Option {
  value: string;
  label: string;
  disabled?: boolean;
}

export function SelectField(props: ControlProps<"select"> & { options: readonly Option[] }) {
  const { label, unit, echo, hint, className, options, ...select } = props;
  const shared = { label, unit, echo, hint, ...(className === undefined ? {} : { className }) };
  const { field, frame } = useCell({ ...shared, name: select.name });
  const value = select.value === undefined ? { defaultValue: field.value ?? select.defaultValue } : {};
  return (
    <Frame {...shared} {...frame}>
      <span className="relative block w-full min-w-0">
        <select {...select} {...value} {...field.attributes} className={`${control} h-7 appearance-none pr-10`}>
          {options.map((option) => (
            <option key={option.value} {...option} className="bg-leaf text-ink" />
          ))}
        </select>
        <ChevronDown
          size={20}
          strokeWidth={1.75}
          aria-hidden
          className="pointer-events-none absolute right-2.5 bottom-2 text-quiet"
        />
      </span>
    </Frame>
  );
}

export function TextAreaField(props: ControlProps<"textarea">) {
  const { label, unit, echo, hint, className, rows = 4, ...area } = props;
  const shared = { label, unit, echo, hint, ...(className === undefined ? {} : { className }) };
  const { field, frame } = useCell({ ...shared, name: area.name });
  const value = area.value === undefined ? { defaultValue: field.value ?? area.defaultValue } : {};
  return (
    <Frame {...shared} {...frame}>
      <textarea rows={rows} {...area} {...value} {...field.attributes} className={`${control} resize-y`} />
    </Frame>
  );
}

/** A box to tick, sent as `on` or as the value given; a form sent back keeps its tick. */
export function CheckField({
  label,
  hint,
  className,
  ...input
}: Omit<ControlProps<"input">, "type" | "unit" | "echo">) {
  const hintId = useId();
  const field = useField(input.name, hint === undefined ? undefined : hintId);
  const checked = field.value === undefined ? input.defaultChecked : field.value === (input.value ?? "on");
  return (
    <div className={`min-w-0 ${className ?? ""}`}>
      <div className="flex items-start gap-2.5">
        <span className="flex h-6 items-center">
          <input
            type="checkbox"
            {...input}
            {...field.attributes}
            defaultChecked={checked}
            className="size-5 accent-signal"
          />
        </span>
        <label htmlFor={field.id} className="text-15/6">
          {label}
        </label>
      </div>
      <FieldError id={field.errorId}>{field.error}</FieldError>
      {hint === undefined ? null : (
        <p id={hintId} className="mt-1 text-12 text-quiet">
          {hint}
        </p>
      )}
    </div>
  );
}
