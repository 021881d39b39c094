// Sign-in by address and password: remix-auth's form strategy over our users, with the same words whatever was wrong.
import { Authenticator } from "remix-auth";
import { FormStrategy } from "remix-auth-form";
import { User } from "~/db/models";
import { databaseNow } from "~/db/queries/clock";
import { SYSTEM } from "~/db/scoping";
import { parseSignInForm } from "~/forms/account";
import { invalid, ok, type FieldErrors, type Result } from "~/forms/form";
import { recordEvent } from "./audit.server";
import { passwordFits } from "./passwords.server";
import { inTransaction } from "./transaction.server";

const WRONG = "No account fits this address and password. Check both, or ask for a new password.";

export interface SignedIn {
  readonly userId: number;
  readonly organisationKind: "buyer" | "supplier";
  readonly returnTo: string;
  /** What the password was checked against, for `startSession`; goes to no page. */
  readonly checkedHash: string;
}

/** Where the attempt came from, for the audit trail. */
interface Origin {
  readonly requestId?: string;
  readonly ip?: string;
}

class SignInRefused extends Error {
  constructor(
    readonly errors: FieldErrors,
    readonly values: Record<string, string>,
  ) {
    super("sign-in refused");
  }
}

async function verifyForm(form: FormData, origin: Origin): Promise<SignedIn> {
  const input = parseSignInForm(form);
  if (!input.ok) throw new SignInRefused(input.errors, input.values);
  const { email, password, returnTo } = input.value;
  const user = await User.findOne({ where: { email }, actor: SYSTEM });
  const fits = await passwordFits(user?.passwordHash, password);
  if (!user?.passwordHash || !fits || user.disabledAt) {
    await noteAttempt(user, "sign-in refused", origin);
    throw new SignInRefused({ form: [WRONG] }, { email, returnTo });
  }
  await noteAttempt(user, "signed in", origin);
  return { userId: user.id, organisationKind: user.organisationKind, returnTo, checkedHash: user.passwordHash };
}

async function noteAttempt(user: User | null, action: string, origin: Origin): Promise<void> {
  await inTransaction(async (transaction) =>
    recordEvent(
      null,
      await databaseNow(transaction),
      { subject: "session", action, detail: user ? { userId: user.id } : {}, ...origin },
      transaction,
    ),
  );
}

/** Who the posted form is, or the errors to show with the address that was typed. */
export async function signIn(
  request: Request,
  origin: Origin = {},
): Promise<Result<SignedIn> & { values?: Record<string, string> }> {
  const authenticator = new Authenticator<SignedIn>();
  authenticator.use(new FormStrategy<SignedIn>(({ form }) => verifyForm(form, origin)), "password");
  try {
    return ok(await authenticator.authenticate("password", request));
  } catch (error) {
    if (!(error instanceof SignInRefused)) throw error;
    return { ...invalid(error.errors), values: error.values };
  }
}
