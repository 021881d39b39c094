// A draft RFQ in its form.
import { data, href, redirect } from "react-router";
import { LinkButton } from "~/components/button";
import { editSweeps } from "~/components/measurement-plan-fields";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { RfqBlock } from "~/components/rfq-block";
import { RfqForm } from "~/components/rfq-form";
import { formValues } from "~/forms/fields";
import { parseRfqForm } from "~/forms/rfq";
import { timeZones } from "~/forms/time-zones";
import { orNotFound, requireRight } from "~/services/request.server";
import { readRfqHead } from "~/services/rfq-head.server";
import { editRfq, readRfqDraft } from "~/services/rfqs.server";
import type { Route } from "./+types/rfq-edit";

export const meta: Route.MetaFunction = ({ loaderData }) => [{ title: `Edit ${loaderData.head.number} · Tenderband` }];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "manage-rfq");
  const head = orNotFound(await readRfqHead(person, params.rfqId));
  const draft = orNotFound(await readRfqDraft(person, params.rfqId));
  return { head, draft, zones: timeZones(draft.values.dueZone) };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "manage-rfq");
  const form = await request.formData();
  const rows = editSweeps(formValues(form));
  if (rows) return data({ values: rows, errors: {} }, { status: 200 });
  const read = parseRfqForm(form, { now: new Date() });
  if (!read.ok) return data({ values: read.values, errors: read.errors }, { status: 400 });
  const lockVersion = Number(form.get("lockVersion"));
  const saved = orNotFound(await editRfq(person, params.rfqId, lockVersion, read.value));
  if (!saved.ok) return data({ values: formValues(form), errors: saved.errors }, { status: 400 });
  return redirect(href("/rfqs/:rfqId", { rfqId: params.rfqId }));
}

export default function RfqEdit({ loaderData, actionData }: Route.ComponentProps) {
  const { head, draft, zones } = loaderData;
  const overview = href("/rfqs/:rfqId", { rfqId: head.publicId });
  return (
    <Page>
      <RfqBlock head={head} sheet="Overview" />
      {draft.refusal === null ? (
        <RfqForm
          state={actionData ?? { values: draft.values, errors: {} }}
          zones={zones}
          lockVersion={draft.lockVersion}
          save="Save the draft"
          beside={
            <LinkButton kind="plain" to={overview}>
              Back without saving
            </LinkButton>
          }
        />
      ) : (
        <Section title="This RFQ is fixed">
          <Notice>{draft.refusal} Only a draft is edited.</Notice>
        </Section>
      )}
    </Page>
  );
}
