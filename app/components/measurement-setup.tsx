// The setup of one sweep, under its row: the same figures as of the quote, for this sweep alone or for those like it.
import { useEffect, useRef } from "react";
import type { FormState } from "~/forms/form";
import { setupToValues } from "~/forms/setup";
import type { Setup } from "~/rf/contract";
import { Button, LinkButton } from "./button";
import { PostForm, SelectField } from "./form";
import { formatBand } from "./format";
import { counted, type MeasuredFile } from "./measurement-groups";
import { SetupFields } from "./setup-fields";

export interface SweepSetupContext {
  readonly assumed: Setup;
  /** What the quote states. */
  readonly quote: Setup;
}

interface SweepSetupProps extends SweepSetupContext {
  file: MeasuredFile;
  /** All of the quote. */
  files: readonly MeasuredFile[];
  /** What the action sent back. */
  state: FormState | undefined;
}

export function SweepSetup({ file, files, assumed, quote, state }: SweepSetupProps) {
  const title = useRef<HTMLHeadingElement>(null);
  useEffect(() => title.current?.focus({ preventScroll: true }), []);
  return (
    <section id={`setup-${file.publicId}`} className="scroll-mt-24 pt-2 pb-6">
      <h3 ref={title} tabIndex={-1} className="outline-none">
        Setup of {file.fileName}
      </h3>
      <p className="pb-3 text-13 text-quiet">
        What you enter here goes before the quote’s. A field left blank takes the figure that stands in it.
      </p>
      <PostForm state={state ?? { values: setupToValues(file.setup ?? {}), errors: {} }}>
        <div className="grid grid-cols-1 gap-4 tablet:grid-cols-2 desktop:grid-cols-4">
          <SetupFields assumed={assumed} quote={quote} />
          <SelectField name="scope" label="Counts for" options={scopes(file, files)} />
        </div>
        <div className="mt-4 flex flex-wrap items-center gap-3">
          <Button name="intent" value={`setup:${file.publicId}`}>
            Save setup of the sweep
          </Button>
          <LinkButton kind="plain" to="?" preventScrollReset>
            Cancel
          </LinkButton>
        </div>
      </PostForm>
    </section>
  );
}

function scopes(file: MeasuredFile, files: readonly MeasuredFile[]) {
  const ofUnit = files.filter(({ serial }) => serial === file.serial);
  const alike = files.filter(({ sweep }) => sweep[0] === file.sweep[0] && sweep[1] === file.sweep[1]);
  return [
    { value: "sweep", label: "this sweep" },
    ...(file.serial !== null && ofUnit.length > 1
      ? [{ value: "unit", label: `all ${counted(ofUnit.length, "sweep")} of unit ${file.serial}` }]
      : []),
    ...(alike.length > 1
      ? [{ value: "range", label: `all ${counted(alike.length, "sweep")} over ${formatBand(file.sweep)}` }]
      : []),
  ];
}
