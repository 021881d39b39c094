// The form around a sheet of the draft: what is typed is kept whenever it is saved, and what is not in order is marked.
import type { ReactNode } from "react";
import type { FieldErrors, FormState } from "~/forms/form";
import { Button } from "./button";
import { PostForm } from "./form";
import { Notice } from "./notice";

/** What a sheet's action sends back. */
export interface DraftAnswer extends FormState {
  readonly lockVersion: number;
  /** The entries were kept all the same. */
  readonly saved: boolean;
}

interface QuoteDraftFormProps {
  values: FormState["values"];
  /** Of the entries as they are stored, shown when the review sent the reader here. */
  errors: FieldErrors;
  lockVersion: number;
  answer: DraftAnswer | undefined;
  wasSaved: boolean;
  canEdit: boolean;
  /** @default "mt-6" */
  className?: string;
  children: ReactNode;
}

export function QuoteDraftForm(props: QuoteDraftFormProps) {
  const { answer, canEdit, values, errors, className = "mt-6" } = props;
  return (
    <PostForm state={answer ?? { values, errors }} guardsUnsaved className={className}>
      <DraftNotice {...props} />
      <input type="hidden" name="lockVersion" value={answer?.lockVersion ?? props.lockVersion} />
      <fieldset disabled={!canEdit} className="min-w-0 [&>section:first-child]:mt-0">
        {props.children}
      </fieldset>
      {canEdit ? (
        <div className="mt-9 flex flex-wrap items-center gap-4 border-t border-rule pt-5">
          <Button kind="filled" name="intent" value="continue">
            Save and continue
          </Button>
          <Button name="intent" value="save">
            Save draft
          </Button>
          <p className="text-13 text-quiet">A draft is kept as it is typed, complete or not.</p>
        </div>
      ) : null}
    </PostForm>
  );
}

function DraftNotice({ answer, wasSaved }: Pick<QuoteDraftFormProps, "answer" | "wasSaved">) {
  if (answer?.saved)
    return (
      <Notice tone="near" role="status" className="mb-6">
        Kept as it is typed. What is marked has to be put right before you submit.
      </Notice>
    );
  if (!wasSaved || answer) return null;
  return (
    <Notice tone="signal" role="status" className="mb-6">
      Draft saved.
    </Notice>
  );
}
