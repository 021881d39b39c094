// What the rows of a list of measured files share: state of placing and dragging, the form their fields belong to, open setups.
import type { ReactNode } from "react";
import type { FieldErrors } from "~/forms/form";
import type { Dragging } from "./measurement-dragging";
import type { MeasuredFile } from "./measurement-groups";
import type { Placing } from "./measurement-placing";

export interface ListTools {
  readonly canEdit: boolean;
  readonly placing: Placing;
  readonly dragging: Dragging;
  /** Id of the form that the list's fields belong to. */
  readonly form: string;
  readonly errors: FieldErrors;
  readonly scoring: "done" | "pending" | "failed";
  readonly setupOf: string | null;
  readonly renderSetup: (file: MeasuredFile) => ReactNode;
}
