// An invitation, by its mail's link: who asks, for what and until when; accepted by a new or an existing account, or declined.
import { data, href, redirect } from "react-router";
import { InvitationAnswer, InvitationBlock, InvitationGone } from "~/components/rfq-invitation-answer";
import { Notice } from "~/components/notice";
import { Page } from "~/components/page";
import { parseAcceptInvitationForm } from "~/forms/account";
import { formValues } from "~/forms/fields";
import { parseReasonForm } from "~/forms/rfq-steps";
import {
  acceptAsMember,
  acceptAsNew,
  declineInvitation,
  readOffer,
  type InvitationOffer,
} from "~/services/invitation-acceptance.server";
import { forgetLinkToken, LINK_PAGE_HEADERS, readLinkToken } from "~/services/link-cookie.server";
import { currentPerson, notFound, requestFactsContext } from "~/services/request.server";
import { startSession } from "~/services/sessions.server";
import type { Route } from "./+types/invitation-accept";

export const meta: Route.MetaFunction = () => [{ title: "Invitation · Tenderband" }];

export const headers: Route.HeadersFunction = () => LINK_PAGE_HEADERS;

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = currentPerson(context);
  const token = await readLinkToken("invitation", request);
  const isDeclined = new URL(request.url).searchParams.has("declined");
  return {
    offer: token === null ? null : await readOffer(token),
    isDeclined,
    reader: person && {
      kind: person.organisationKind,
      name: person.name,
      email: person.email,
      organisation: person.organisationName,
    },
  };
}

/** What the page answers an answer with: gone links look alike, whatever ended them. */
export async function action({ request, context }: Route.ActionArgs) {
  const token = await readLinkToken("invitation", request);
  const offer = token === null ? null : await readOffer(token);
  if (token === null || offer === null) return data({ gone: true as const }, { status: 410 });
  const form = await request.formData();
  switch (form.get("intent")) {
    case "accept-new":
      return acceptNew({ request, context, token, offer, form });
    case "accept":
      return acceptMember({ request, context, token, offer, form });
    case "decline":
      return decline({ request, context, token, offer, form });
    default:
      throw notFound();
  }
}

interface Answering extends Pick<Route.ActionArgs, "request" | "context"> {
  readonly token: string;
  readonly offer: InvitationOffer;
  readonly form: FormData;
}

const named = (form: FormData) => formValues(form).invitation ?? "";
const gone = () => data({ gone: true as const }, { status: 410 });
const refused = (form: FormData, errors: Record<string, string[] | undefined>) =>
  data({ values: withoutPasswords(form), errors }, { status: 400 });

function withoutPasswords(form: FormData) {
  const values = formValues(form);
  delete values.password;
  delete values.passwordAgain;
  return values;
}

const invitationPage = (invitationId: string) => href("/supplier/invitations/:invitationId", { invitationId });

async function acceptNew({ request, context, token, offer, form }: Answering) {
  const read = parseAcceptInvitationForm(form, { email: offer.email });
  if (!read.ok) return refused(form, read.errors);
  const { requestId, ip } = context.get(requestFactsContext);
  const answer = await acceptAsNew(token, named(form), read.value, { requestId, ip });
  if (answer === null) return gone();
  if (!answer.ok) return refused(form, answer.errors);
  const headers = new Headers([
    ["Set-Cookie", await startSession(answer.value.userId, request, ip)],
    ["Set-Cookie", await forgetLinkToken("invitation")],
  ]);
  return redirect(invitationPage(answer.value.invitation), { headers });
}

async function acceptMember({ context, token, form }: Answering) {
  const person = currentPerson(context);
  if (person === null) return refused(form, { form: ["Sign in first: your session has ended."] });
  const answer = await acceptAsMember(person, token, named(form), form.get("confirmed") === "on");
  if (answer === null) return gone();
  if (!answer.ok) return refused(form, answer.errors);
  return redirect(invitationPage(answer.value.invitation), {
    headers: { "Set-Cookie": await forgetLinkToken("invitation") },
  });
}

async function decline({ context, token, form }: Answering) {
  const read = parseReasonForm(form);
  if (!read.ok) return refused(form, read.errors);
  const answer = await declineInvitation(currentPerson(context), token, named(form), read.value.reason);
  if (answer === null) return gone();
  if (!answer.ok) return refused(form, answer.errors);
  return redirect(`${href("/invitation")}?declined`, {
    headers: { "Set-Cookie": await forgetLinkToken("invitation") },
  });
}

export default function InvitationAccept({ loaderData, actionData }: Route.ComponentProps) {
  const { offer, reader, isDeclined } = loaderData;
  const isGone = offer === null || (actionData !== undefined && "gone" in actionData);
  if (isGone)
    return (
      <Page>
        {isDeclined && offer === null ? (
          <div className="mt-14 max-w-160">
            <h1 className="mb-4 text-24 font-bold">Invitation declined</h1>
            <Notice tone="signal" role="status">
              The buyer reads your reason. If things change, ask them to invite you again.
            </Notice>
          </div>
        ) : (
          <InvitationGone isSignedIn={reader !== null} />
        )}
      </Page>
    );
  const state = actionData && "values" in actionData ? actionData : undefined;
  return (
    <Page>
      <InvitationBlock offer={offer} />
      <InvitationAnswer offer={offer} reader={reader} state={state} />
    </Page>
  );
}
