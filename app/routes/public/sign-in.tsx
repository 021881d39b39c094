// Sign in by address and password.
import { data, Link, redirect } from "react-router";
import { Button } from "~/components/button";
import { Field, PostForm } from "~/components/form";
import { Notice } from "~/components/notice";
import { Page } from "~/components/page";
import { currentPerson, requestFactsContext, safeReturn } from "~/services/request.server";
import { startSession } from "~/services/sessions.server";
import { signIn } from "~/services/sign-in.server";
import type { Route } from "./+types/sign-in";

export const meta: Route.MetaFunction = () => [{ title: "Sign in · Tenderband" }];

export function loader({ request, context }: Route.LoaderArgs) {
  const search = new URL(request.url).searchParams;
  const returnTo = safeReturn(search.get("returnTo"), "");
  if (currentPerson(context)) throw redirect(returnTo || "/");
  return { returnTo, passwordChanged: search.get("changed") === "1" };
}

export async function action({ request, context }: Route.ActionArgs) {
  const { ip, requestId } = context.get(requestFactsContext);
  const outcome = await signIn(request, { requestId, ...(ip ? { ip } : {}) });
  if (!outcome.ok) return data({ values: outcome.values ?? {}, errors: outcome.errors }, { status: 400 });
  const { userId, organisationKind, returnTo, checkedHash } = outcome.value;
  const home = organisationKind === "buyer" ? "/open-points" : "/supplier/open-points";
  const cookie = await startSession(userId, request, ip, checkedHash);
  return redirect(safeReturn(returnTo, home), { headers: { "Set-Cookie": cookie } });
}

export default function SignIn({ loaderData, actionData }: Route.ComponentProps) {
  return (
    <Page>
      <div className="mt-14 max-w-100">
        <h1 className="mb-6 text-24 font-bold">Sign in</h1>
        {loaderData.passwordChanged ? (
          <div className="mb-6">
            <Notice tone="signal">The new password is set. Sign in with it.</Notice>
          </div>
        ) : null}
        <PostForm state={actionData} className="flex flex-col gap-4">
          <input type="hidden" name="returnTo" value={loaderData.returnTo} />
          <Field name="email" label="E-mail" type="email" autoComplete="username" required />
          <Field name="password" label="Password" type="password" autoComplete="current-password" required />
          <div className="mt-2 flex items-center gap-5">
            <Button kind="filled">Sign in</Button>
            <Link to="/forgotten-password" className="text-13">
              Forgotten password
            </Link>
          </div>
        </PostForm>
      </div>
    </Page>
  );
}
