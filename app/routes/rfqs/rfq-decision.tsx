// The decision on an RFQ: recommend a quote, approve or return the recommendation, and the record of what was decided.
import { data, href, redirect } from "react-router";
import { LinkButton } from "~/components/button";
import { DecisionApproval } from "~/components/decision-approval";
import { DecisionChoice } from "~/components/decision-choice";
import { DecisionRecord, DecisionSnapshotTable } from "~/components/decision-record";
import { Empty } from "~/components/empty";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { RfqBlock } from "~/components/rfq-block";
import { parseDecisionForm, parseRecommendationForm } from "~/forms/decision";
import { formValues } from "~/forms/fields";
import { readDecisionView } from "~/services/decision-view.server";
import { approveAward, recommendAward, returnRecommendation } from "~/services/decisions.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import type { Person } from "~/services/person.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { readRfqHead } from "~/services/rfq-head.server";
import type { Route } from "./+types/rfq-decision";

export const meta: Route.MetaFunction = ({ loaderData: { head } }) => [
  { title: `Decision, ${head.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-results");
  const head = orNotFound(await readRfqHead(person, params.rfqId));
  const view = orNotFound(await readDecisionView(person, params.rfqId));
  return { head, view, idempotencyKey: newIdempotencyKey() };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "recommend-award");
  const form = await request.formData();
  const outcome = orNotFound(await take(person, params.rfqId, form));
  if (!outcome.ok) return data({ values: formValues(form), errors: outcome.errors }, { status: 400 });
  return redirect(href("/rfqs/:rfqId/decision", { rfqId: params.rfqId }));
}

async function take(person: Person, rfqId: string, form: FormData) {
  const sent = form.get("idempotencyKey");
  const key = typeof sent === "string" ? sent : "";
  if (form.get("intent") === "recommend") {
    const read = parseRecommendationForm(form);
    return read.ok ? recommendAward(person, key, rfqId, read.value) : read;
  }
  const read = parseDecisionForm(form);
  if (!read.ok) return read;
  const { intent, decisionId, remark } = read.value;
  const step = intent === "approve" ? approveAward : returnRecommendation;
  return step(person, key, rfqId, decisionId, remark);
}

export default function RfqDecision({ loaderData, actionData }: Route.ComponentProps) {
  const { head, view, idempotencyKey } = loaderData;
  const { live } = view;
  const compare = href("/rfqs/:rfqId/comparison", { rfqId: head.publicId });
  return (
    <Page>
      <RfqBlock head={head} sheet="Decision" actions={<LinkButton to={compare}>Compare quotes</LinkButton>} />
      {live ? (
        <>
          <DecisionRecord record={live} zone={head.dueZone} />
          {live.state === "recommended" ? (
            <DecisionApproval
              decisionId={live.publicId}
              refusal={view.approvalRefusal}
              approvers={view.approvers}
              suppliers={live.snapshot.quotes.length}
              idempotencyKey={idempotencyKey}
              state={actionData}
            />
          ) : (
            <Notice className="mt-6">
              The award is a notice of intent: the purchase order governs. Every supplier that quoted was told its own
              outcome by mail.
            </Notice>
          )}
          <DecisionSnapshotTable record={live} />
        </>
      ) : (
        <Recommendation loaded={loaderData} state={actionData} />
      )}
      {view.returned.map((record) => (
        <DecisionRecord key={record.publicId} record={record} zone={head.dueZone} />
      ))}
    </Page>
  );
}

type Props = Route.ComponentProps;

function Recommendation({ loaded, state }: { loaded: Props["loaderData"]; state: Props["actionData"] }) {
  const { head, view, idempotencyKey } = loaded;
  if (view.recommendRefusal !== null)
    return (
      <Section title="Recommend an award">
        <Notice>
          {view.recommendRefusal} {head.state === "open" ? "An award is recommended once it is closed." : ""}
        </Notice>
      </Section>
    );
  if (view.candidates.length === 0)
    return (
      <Section title="Recommend an award">
        <Empty sentence="No quote was submitted: there is nothing to award. The RFQ can be cancelled on its overview." />
      </Section>
    );
  return (
    <Section title="Recommend an award" note="A conforming quote, with the reason. A second person approves it.">
      <DecisionChoice
        candidates={view.candidates}
        quantity={head.quantity}
        currency={head.currency}
        idempotencyKey={idempotencyKey}
        state={state}
      />
    </Section>
  );
}
