// Whom an RFQ asks: invitations by company and address, their states, and the steps they allow.
import { data, href, redirect } from "react-router";
import { LinkButton } from "~/components/button";
import { Empty } from "~/components/empty";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { RfqBlock } from "~/components/rfq-block";
import { InvitationRows, InvitationTable } from "~/components/rfq-invitations";
import { formValues } from "~/forms/fields";
import { parseInvitationRows, readInvitationId } from "~/forms/rfq-steps";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { addInvitations, listInvitations, resendInvitation, revokeInvitation } from "~/services/invitations.server";
import type { Person } from "~/services/person.server";
import { notFound, orNotFound, requireRight } from "~/services/request.server";
import { readRfqHead } from "~/services/rfq-head.server";
import { suggestSuppliers } from "~/services/suppliers.server";
import { canRfq } from "~/workflow/rfq";
import { may } from "~/workflow/roles";
import type { Route } from "./+types/rfq-invitations";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Invitations, ${loaderData.head.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-rfq");
  const head = orNotFound(await readRfqHead(person, params.rfqId));
  const sheet = orNotFound(await listInvitations(person, params.rfqId));
  const mayInvite = may(person.role, "invite-supplier");
  const suggestions = mayInvite && sheet.refusal === null ? await suggestSuppliers(person) : [];
  return { head, sheet, mayInvite, suggestions, idempotencyKey: newIdempotencyKey() };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "invite-supplier");
  const form = await request.formData();
  const outcome = orNotFound(await take(person, params.rfqId, form));
  if (!outcome.ok) return data({ values: formValues(form), errors: outcome.errors }, { status: 400 });
  return redirect(href("/rfqs/:rfqId/invitations", { rfqId: params.rfqId }));
}

async function take(person: Person, rfqId: string, form: FormData) {
  const intent = form.get("intent");
  if (intent === "add") {
    const read = parseInvitationRows(form);
    return read.ok ? addInvitations(person, formValues(form).idempotencyKey ?? "", rfqId, read.value) : read;
  }
  const invitation = readInvitationId(form);
  if (invitation === null) throw notFound();
  if (intent === "resend") return resendInvitation(person, rfqId, invitation);
  if (intent === "revoke") return revokeInvitation(person, rfqId, invitation);
  throw notFound();
}

export default function RfqInvitations({ loaderData, actionData }: Route.ComponentProps) {
  const { head, sheet, mayInvite, suggestions, idempotencyKey } = loaderData;
  const isDraft = head.state === "draft";
  // A row's button has no field to hang its refusal on: it is said above the table.
  const refusals = actionData && actionData.values.intent !== "add" ? (actionData.errors.form ?? []) : [];
  return (
    <Page>
      <RfqBlock
        head={head}
        sheet="Invitations"
        actions={mayInvite && canRfq("open", head.state) ? <OpenLink rfqId={head.publicId} /> : undefined}
      />
      {refusals.map((sentence) => (
        <Notice key={sentence} tone="fail" role="alert" className="mt-6">
          {sentence}
        </Notice>
      ))}
      <Section title="Invitations" note={isDraft ? "Nothing is mailed before the RFQ is opened." : undefined}>
        {sheet.entries.length === 0 ? (
          <Empty sentence="No supplier is on the list yet. Each one gets a mail with a link of its own, and never learns of the others." />
        ) : (
          <InvitationTable entries={sheet.entries} zone={head.dueZone} now={sheet.now} />
        )}
      </Section>
      {mayInvite ? (
        <Section
          title={isDraft ? "Add suppliers" : "Invite more suppliers"}
          note="A company that is not in the supplier directory yet is added to it as a candidate."
        >
          {sheet.refusal === null ? (
            <InvitationRows
              state={actionData?.values.intent === "add" ? actionData : undefined}
              idempotencyKey={idempotencyKey}
              suggestions={suggestions}
              mailsAtOnce={!isDraft}
            />
          ) : (
            <Notice>{sheet.refusal} Nobody can be invited now.</Notice>
          )}
        </Section>
      ) : null}
    </Page>
  );
}

function OpenLink({ rfqId }: { rfqId: string }) {
  return (
    <LinkButton kind="filled" to={`${href("/rfqs/:rfqId", { rfqId })}?step=open`}>
      Open RFQ…
    </LinkButton>
  );
}
