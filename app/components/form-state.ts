// What a form tells the fields and buttons inside it: typed values, errors, its id, and what it is sending.
import { createContext, useContext, type ComponentProps } from "react";
import type { FormState } from "~/forms/form";

export interface FormScope extends FormState {
  readonly formId: string;
  /** What is on its way to the server, or null. */
  readonly sending: FormData | null;
}

export const FormScopeContext = createContext<FormScope>({ values: {}, errors: {}, formId: "", sending: null });

/** The id of the control with this name, to which the summary of errors links. */
export const controlId = (formId: string, name: string): string => `${formId}${name}`;

/** For a control of one's own: its id, typed value, error sentence, and the attributes that join them. */
export function useField(name: string, describedBy?: string) {
  const { formId, values, errors } = useContext(FormScopeContext);
  const id = controlId(formId, name);
  const error = errors[name]?.join(" ");
  const description = [error ? `${id}-error` : undefined, describedBy].filter(Boolean).join(" ");
  return {
    id,
    value: values[name],
    error,
    errorId: `${id}-error`,
    attributes: { id, name, "aria-invalid": error ? true : undefined, "aria-describedby": description || undefined },
  };
}

/** Whether the form around is sending because of the button with this name and value. */
export function usePressed(name: string | undefined, value: ComponentProps<"button">["value"] = ""): boolean {
  const { sending } = useContext(FormScopeContext);
  if (sending === null) return false;
  return name === undefined || sending.get(name) === String(value);
}
