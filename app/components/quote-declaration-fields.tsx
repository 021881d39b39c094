// The answer to each line that is declared instead of measured: comply, or an exception with what is offered instead.
import { FieldError } from "./field-error";
import { TextAreaField, useField } from "./form";

/** A declared line, as `readQuoteTerms` gives it. */
export interface DeclaredLineFacts {
  readonly lineKey: string;
  readonly lineNumber: string;
  readonly name: string;
  readonly limit: string;
}

export function DeclarationFields({ lines }: { lines: readonly DeclaredLineFacts[] }) {
  return (
    <ol className="border-t-[1.5px] border-ink">
      {lines.map((line) => (
        <li
          key={line.lineKey}
          className="grid grid-cols-1 gap-x-8 gap-y-3 border-b border-rule py-4 tablet:grid-cols-[minmax(0,1fr)_minmax(0,1fr)]"
        >
          <AnswerField line={line} />
          <TextAreaField
            name={`declarations.${line.lineKey}.text`}
            label={`${line.lineNumber}, offered figure or exception in words`}
            rows={2}
            maxLength={2000}
          />
        </li>
      ))}
    </ol>
  );
}

const ANSWERS = [
  { value: "comply", label: "Comply" },
  { value: "exception", label: "Exception" },
] as const;

function AnswerField({ line }: { line: DeclaredLineFacts }) {
  const field = useField(`declarations.${line.lineKey}.answer`);
  return (
    <fieldset id={field.id} tabIndex={-1} aria-describedby={field.error ? field.errorId : undefined}>
      <legend className="flex gap-4">
        <span className="w-9 font-semibold tabular-nums">{line.lineNumber}</span>
        <span>
          <span className="block font-semibold">{line.name}</span>
          <span className="block text-13 text-quiet">{line.limit}</span>
        </span>
      </legend>
      <div className="mt-2 ml-13 flex flex-wrap gap-x-6">
        {ANSWERS.map(({ value, label }) => (
          <label key={value} className="flex min-h-9 items-center gap-2.5 pointer-coarse:min-h-11">
            <input
              type="radio"
              name={`declarations.${line.lineKey}.answer`}
              value={value}
              defaultChecked={field.value === value}
              className="size-5 accent-signal"
            />
            {label}
          </label>
        ))}
      </div>
      <div className="ml-13">
        <FieldError id={field.errorId}>{field.error}</FieldError>
      </div>
    </fieldset>
  );
}
