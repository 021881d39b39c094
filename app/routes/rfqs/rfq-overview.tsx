// One RFQ: what it asks, and the steps of its life: open, close early, cancel.
import { data, href, redirect } from "react-router";
import { LinkButton } from "~/components/button";
import { Notice } from "~/components/notice";
import { Page } from "~/components/page";
import { RfqBlock } from "~/components/rfq-block";
import { RFQ_STEPS, RfqStepPanel } from "~/components/rfq-step";
import { RfqTerms } from "~/components/rfq-terms";
import { formValues } from "~/forms/fields";
import { parseReasonForm } from "~/forms/rfq-steps";
import { cancelRfq, closeRfq } from "~/services/closing.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import type { Person } from "~/services/person.server";
import { notFound, orNotFound, requireRight } from "~/services/request.server";
import { readRfqHead } from "~/services/rfq-head.server";
import { readRfqOverview } from "~/services/rfq-overview.server";
import { openRfq } from "~/services/rfqs.server";
import { canRfq, rfqRefusal } from "~/workflow/rfq";
import { may } from "~/workflow/roles";
import type { Route } from "./+types/rfq-overview";

export const meta: Route.MetaFunction = ({ loaderData }) => [{ title: `${loaderData.head.number} · Tenderband` }];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-rfq");
  const head = orNotFound(await readRfqHead(person, params.rfqId));
  const overview = orNotFound(await readRfqOverview(person, params.rfqId));
  const mayManage = may(person.role, "manage-rfq");
  const asked = new URL(request.url).searchParams.get("step");
  const step = mayManage ? (RFQ_STEPS.find((known) => known === asked) ?? null) : null;
  return { head, overview, mayManage, step, idempotencyKey: newIdempotencyKey() };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "manage-rfq");
  const form = await request.formData();
  const outcome = orNotFound(await take(person, params.rfqId, form));
  if (!outcome.ok) return data({ values: outcome.values ?? {}, errors: outcome.errors }, { status: 400 });
  return redirect(href("/rfqs/:rfqId", { rfqId: params.rfqId }));
}

async function take(person: Person, rfqId: string, form: FormData) {
  const intent = form.get("intent");
  if (intent === "open") return withoutValues(await openRfq(person, formValues(form).idempotencyKey ?? "", rfqId));
  if (intent === "close") return withoutValues(await closeRfq(person, rfqId));
  if (intent !== "cancel") throw notFound();
  const read = parseReasonForm(form);
  return read.ok ? withoutValues(await cancelRfq(person, rfqId, read.value.reason)) : read;
}

const withoutValues = <T extends object>(outcome: T | null) => outcome && { values: undefined, ...outcome };

export default function RfqOverview({ loaderData, actionData }: Route.ComponentProps) {
  const { head, overview, mayManage, step } = loaderData;
  return (
    <Page>
      <RfqBlock head={head} sheet="Overview" actions={step === null ? actionsFor(head, mayManage) : undefined} />
      {step === null ? (
        <StateNotice head={head} overview={overview} mayManage={mayManage} />
      ) : (
        <RfqStepPanel
          step={step}
          head={head}
          toMail={overview.toMail}
          missing={overview.missing}
          refusal={rfqRefusal(step, head.state)}
          now={overview.now}
          idempotencyKey={loaderData.idempotencyKey}
          state={actionData}
        />
      )}
      <RfqTerms head={head} terms={overview} />
    </Page>
  );
}

type Loaded = Route.ComponentProps["loaderData"];

/** Null in a state that allows none: the block then draws no cell for them. */
function actionsFor(head: Loaded["head"], mayManage: boolean) {
  const isOver = head.state === "decided" || head.state === "cancelled";
  return mayManage && !isOver ? <Actions head={head} /> : undefined;
}

function Actions({ head }: { head: Loaded["head"] }) {
  const page = href("/rfqs/:rfqId", { rfqId: head.publicId });
  const { state } = head;
  return (
    <>
      {canRfq("cancel", state) ? (
        <LinkButton kind="plain" to={`${page}?step=cancel`}>
          Cancel…
        </LinkButton>
      ) : null}
      {canRfq("edit", state) ? (
        <LinkButton to={href("/rfqs/:rfqId/edit", { rfqId: head.publicId })}>Edit</LinkButton>
      ) : null}
      {canRfq("close", state) ? <LinkButton to={`${page}?step=close`}>Close early…</LinkButton> : null}
      {canRfq("open", state) ? (
        <LinkButton kind="filled" to={`${page}?step=open`}>
          Open RFQ…
        </LinkButton>
      ) : null}
      {state === "closed" ? (
        <LinkButton kind="filled" to={href("/rfqs/:rfqId/comparison", { rfqId: head.publicId })}>
          Compare quotes
        </LinkButton>
      ) : null}
    </>
  );
}

/** What the state asks for next. */
function StateNotice({ head, overview, mayManage }: Pick<Loaded, "head" | "overview" | "mayManage">) {
  if (head.state === "cancelled")
    return (
      <Notice className="mt-6">Cancelled{overview.cancelReason === null ? "." : `: ${overview.cancelReason}`}</Notice>
    );
  if (head.state !== "draft" || !mayManage) return null;
  if (overview.missing.includes("due-date"))
    return (
      <Notice tone="near" className="mt-6">
        The due date has passed. Edit the draft and set a later one.
      </Notice>
    );
  if (overview.missing.includes("invitation"))
    return (
      <Notice tone="signal" className="mt-6">
        Suppliers are missing.{" "}
        <LinkButton kind="plain" to={href("/rfqs/:rfqId/invitations", { rfqId: head.publicId })}>
          Invite suppliers
        </LinkButton>
      </Notice>
    );
  return null;
}
