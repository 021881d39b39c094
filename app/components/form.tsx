// A form that posts to an action and shows what the action sent back: summary of errors, typed input, pending state.
import { useEffect, useId, useRef, type ReactNode, type SyntheticEvent } from "react";
import { Form, useFormAction, useNavigation } from "react-router";
import type { FieldErrors, FormState } from "~/forms/form";
import { controlId, FormScopeContext } from "./form-state";
import { UnsavedGuard } from "./unsaved-guard";

export { Field, SelectField, TextAreaField, CheckField } from "./field";
export { FieldError } from "./field-error";
export { useField } from "./form-state";

interface PostFormProps {
  /** What the action returned. */
  state?: FormState | undefined;
  /** @default the page's own address */
  action?: string;
  /** Made by the loader; sent as `idempotencyKey`, so that a second post of the same page changes nothing. */
  idempotencyKey?: string;
  /** Multipart, for files. */
  upload?: boolean;
  /** Ask before the page is left with typed input that was not sent. */
  guardsUnsaved?: boolean;
  className?: string;
  "aria-label"?: string;
  "aria-labelledby"?: string;
  children: ReactNode;
}

const blank: FormState = { values: {}, errors: {} };

/** Validation is the server's alone (`noValidate`), so that its sentences are the ones everybody reads. */
export function PostForm(props: PostFormProps) {
  const { state = blank, action, idempotencyKey, upload, guardsUnsaved, children, ...rest } = props;
  const formId = useId();
  const form = useRef<HTMLFormElement>(null);
  const sending = useSending(action, idempotencyKey);
  const sendOnce = useSendOnce();
  return (
    <Form
      {...rest}
      ref={form}
      method="post"
      noValidate
      {...(action === undefined ? {} : { action })}
      {...(upload ? { encType: "multipart/form-data" as const } : {})}
      onSubmit={sendOnce}
      aria-busy={sending !== null || undefined}
    >
      <ErrorSummary formId={formId} state={state} />
      {idempotencyKey === undefined ? null : <input type="hidden" name="idempotencyKey" value={idempotencyKey} />}
      {guardsUnsaved ? <UnsavedGuard form={form} state={state} /> : null}
      <FormScopeContext value={{ ...state, formId, sending }}>{children}</FormScopeContext>
    </Form>
  );
}

/** This form's data while it is being sent. The key tells two forms on one page apart, the address does otherwise. */
function useSending(action: string | undefined, idempotencyKey: string | undefined): FormData | null {
  const navigation = useNavigation();
  const address = useFormAction(action);
  const data = navigation.formData;
  if (data === undefined || navigation.formAction !== address) return null;
  const sentKey = data.get("idempotencyKey");
  return idempotencyKey === undefined || sentKey === idempotencyKey ? data : null;
}

/** Lets the first press through and swallows the next until the navigation has ended. */
function useSendOnce() {
  const navigation = useNavigation();
  const sent = useRef(false);
  useEffect(() => {
    if (navigation.state === "idle") sent.current = false;
  });
  return (event: SyntheticEvent) => {
    if (sent.current) event.preventDefault();
    sent.current = true;
  };
}

// autoFocus serves the page that came without script; the effect serves the answer drawn in place.
function ErrorSummary({ formId, state }: { formId: string; state: FormState }) {
  const summary = useRef<HTMLDivElement>(null);
  useEffect(() => {
    summary.current?.focus();
  }, [state]);
  const whole = state.errors.form ?? [];
  const byField = fieldErrors(state.errors);
  if (whole.length + byField.length === 0) return null;
  return (
    <div
      ref={summary}
      tabIndex={-1}
      autoFocus
      role="alert"
      className="col-span-full mb-6 border-l-3 border-fail py-0.5 pl-3.5 text-13 outline-offset-4"
    >
      {whole.map((sentence) => (
        <p key={sentence} className="font-semibold">
          {sentence}
        </p>
      ))}
      {byField.length > 0 ? (
        <p className="font-semibold">
          {byField.length === 1 ? "One entry needs a change." : `${byField.length} entries need a change.`}
        </p>
      ) : null}
      <ul>
        {byField.map(([name, sentence]) => (
          <li key={name}>
            <a href={`#${controlId(formId, name)}`} className="inline-block py-0.5 text-fail">
              {sentence}
            </a>
          </li>
        ))}
      </ul>
    </div>
  );
}

const fieldErrors = (errors: FieldErrors): [name: string, sentence: string][] =>
  Object.entries(errors).flatMap(([name, sentences]) =>
    name === "form" || !sentences?.length ? [] : [[name, sentences.join(" ")] as [string, string]],
  );
