// Sets a new password by a mail's link, which it uses up; signing in follows.
import { data, redirect } from "react-router";
import { Button, LinkButton } from "~/components/button";
import { Field, PostForm } from "~/components/form";
import { Notice } from "~/components/notice";
import { Page } from "~/components/page";
import { forgetLinkToken, LINK_PAGE_HEADERS, readLinkToken } from "~/services/link-cookie.server";
import { LINK_SPENT, passwordResetIsOpen, resetPassword } from "~/services/password-reset.server";
import type { Route } from "./+types/password-reset";

export const meta: Route.MetaFunction = () => [{ title: "Set a new password · Tenderband" }];

/** Not `no-referrer`: a form sent without script would then carry `Origin: null` and be refused as another site's. */
export const headers: Route.HeadersFunction = () => LINK_PAGE_HEADERS;

export async function loader({ request }: Route.LoaderArgs) {
  const token = await readLinkToken("password-reset", request);
  return { open: token !== null && (await passwordResetIsOpen(token)), spent: LINK_SPENT };
}

export async function action({ request }: Route.ActionArgs) {
  const token = await readLinkToken("password-reset", request);
  const outcome = await resetPassword(token ?? "", await request.formData());
  if (!outcome.ok) return data({ values: {}, errors: outcome.errors }, { status: 400 });
  return redirect("/sign-in?changed=1", { headers: { "Set-Cookie": await forgetLinkToken("password-reset") } });
}

export default function PasswordReset({ loaderData, actionData }: Route.ComponentProps) {
  return (
    <Page>
      <div className="mt-14 max-w-100">
        <h1 className="mb-6 text-24 font-bold">Set a new password</h1>
        {loaderData.open ? (
          <PostForm state={actionData} className="flex flex-col gap-4">
            <Field
              name="password"
              label="New password"
              type="password"
              autoComplete="new-password"
              hint="At least 12 characters. A sentence is easier to remember than signs."
              required
            />
            <Field
              name="passwordAgain"
              label="New password, again"
              type="password"
              autoComplete="new-password"
              required
            />
            <div className="mt-2">
              <Button kind="filled">Set password</Button>
            </div>
          </PostForm>
        ) : (
          <>
            <Notice tone="near">{loaderData.spent}</Notice>
            <p className="mt-6">
              <LinkButton to="/forgotten-password">Ask for a new link</LinkButton>
            </p>
          </>
        )}
      </div>
    </Page>
  );
}
