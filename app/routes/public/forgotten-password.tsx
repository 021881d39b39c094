// Asks for a link that sets a new password; answers alike for every address.
import { data } from "react-router";
import { Button } from "~/components/button";
import { Field, PostForm } from "~/components/form";
import { Notice } from "~/components/notice";
import { Page } from "~/components/page";
import { parseForgotForm } from "~/forms/account";
import type { FormState } from "~/forms/form";
import { beginPasswordReset } from "~/services/password-reset.server";
import type { Route } from "./+types/forgotten-password";

export const meta: Route.MetaFunction = () => [{ title: "Forgotten password · Tenderband" }];

export async function action({ request }: Route.ActionArgs) {
  const input = parseForgotForm(await request.formData());
  if (!input.ok) {
    const state: FormState = { values: input.values, errors: input.errors };
    return data({ sent: false, state }, { status: 400 });
  }
  beginPasswordReset(input.value.email);
  return data({ sent: true, state: undefined });
}

export default function ForgottenPassword({ actionData }: Route.ComponentProps) {
  return (
    <Page>
      <div className="mt-14 max-w-100">
        <h1 className="mb-6 text-24 font-bold">Forgotten password</h1>
        {actionData?.sent ? (
          <Notice tone="signal">
            If this address has an account, a mail with a link is on its way. The link works once, for 60 minutes.
          </Notice>
        ) : (
          <PostForm state={actionData?.state} className="flex flex-col gap-4">
            <Field name="email" label="E-mail" type="email" autoComplete="username" required />
            <div className="mt-2">
              <Button kind="filled">Mail me a link</Button>
            </div>
          </PostForm>
        )}
      </div>
    </Page>
  );
}
