// The forms around an account: sign in, forgotten password, new password, accepting an invitation.
import { z } from "zod";
import {
  addError,
  collect,
  countCharacters,
  emailField,
  formValues,
  hasErrors,
  textField,
  withoutFields,
  type FormResult,
  type FormValues,
} from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { LONGEST_PASSWORD, passwordProblem, type PasswordContext } from "~/forms/password";

const PASSWORDS = ["password", "passwordAgain", "currentPassword"] as const;

/** Reads a form that carries passwords: they are never among the values sent back. */
function parseWithPassword<S extends z.ZodType>(
  schema: S,
  source: FormData | FormValues,
  check: (value: z.output<S>, errors: FieldErrors) => void = () => undefined,
): FormResult<z.output<S>> {
  const values = formValuesKeepingPasswords(source);
  const errors: FieldErrors = {};
  const value = collect(schema, values, errors);
  if (value !== undefined) check(value, errors);
  if (value === undefined || hasErrors(errors))
    return { ok: false, errors, values: withoutFields(values, ...PASSWORDS) };
  return { ok: true, value };
}

/** A password counts to its last character: line ends are not normalised in it. */
function formValuesKeepingPasswords(source: FormData | FormValues): FormValues {
  const values = formValues(source);
  for (const name of PASSWORDS) {
    const typed = source instanceof FormData ? source.getAll(name).at(-1) : source[name];
    if (typeof typed === "string") values[name] = typed;
  }
  return values;
}

/** A password to compare, not to judge: only its length is bounded, so that no hash runs on a long text. */
const givenPassword = z
  .string()
  .default("")
  .refine((text) => text !== "", "Enter your password.")
  .refine(
    (text) => countCharacters(text) <= LONGEST_PASSWORD,
    `A password has at most ${LONGEST_PASSWORD} characters.`,
  );

const SignIn = z.object({ email: emailField, password: givenPassword, returnTo: z.string().max(2000).default("") });
const Forgot = z.object({ email: emailField });
const newPassword = { password: z.string().default(""), passwordAgain: z.string().default("") };
const Reset = z.object(newPassword);
const Accept = z.object({
  organisationName: textField("Enter your company's name.", 120),
  name: textField("Enter your name.", 120),
  ...newPassword,
});

export type SignInInput = z.output<typeof SignIn>;
export type ForgotInput = z.output<typeof Forgot>;
/** The one password that was typed twice alike. */
export type ResetInput = z.output<typeof Reset>;
export type AcceptInvitationInput = z.output<typeof Accept>;

function refusePassword(input: z.output<typeof Reset>, context: PasswordContext, errors: FieldErrors): void {
  const problem = passwordProblem(input.password, context);
  if (problem) addError(errors, "password", problem);
  else if (input.password !== input.passwordAgain)
    addError(errors, "passwordAgain", "The two passwords differ. Type both again.");
}

/** Fields `email`, `password`, `returnTo`. The address of `returnTo` is checked where it is followed. */
export const parseSignInForm = (source: FormData | FormValues): FormResult<SignInInput> =>
  parseWithPassword(SignIn, source);

/** Field `email`. */
export const parseForgotForm = (source: FormData | FormValues): FormResult<ForgotInput> =>
  parseWithPassword(Forgot, source);

/** Fields `password`, `passwordAgain`. @param context of the account the link belongs to */
export const parseResetForm = (source: FormData | FormValues, context: PasswordContext = {}): FormResult<ResetInput> =>
  parseWithPassword(Reset, source, (input, errors) => refusePassword(input, context, errors));

/** Fields `organisationName`, `name`, `password`, `passwordAgain`. @param email the invited address */
export const parseAcceptInvitationForm = (
  source: FormData | FormValues,
  { email }: { readonly email: string },
): FormResult<AcceptInvitationInput> =>
  parseWithPassword(Accept, source, (input, errors) =>
    refusePassword(input, { email, organisation: input.organisationName, name: input.name }, errors),
  );
