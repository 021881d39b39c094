// The draft of a specification while it is edited.
import { data, href, redirect } from "react-router";
import { Instant } from "~/components/figure";
import { Page } from "~/components/page";
import { editRows } from "~/components/specification-rows";
import { TitleBlock } from "~/components/title-block";
import { formValues } from "~/forms/fields";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { readDraft, readSpecification, saveDraft } from "~/services/specifications.server";
import type { Route } from "./+types/specification-edit";
import { SpecificationEditor } from "./specification-editor";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData.number} ${loaderData.letter} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "write-specification");
  const draft = await readDraft(person, params.specificationId);
  if (draft) return { ...draft, timeZone: person.timeZone, idempotencyKey: newIdempotencyKey() };
  // What is released is read, not edited.
  const { publicId } = orNotFound(await readSpecification(person, params.specificationId));
  throw redirect(href("/specifications/:specificationId", { specificationId: publicId }));
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-specification");
  const form = await request.formData();
  const rows = editRows(formValues(form));
  if (rows) return data({ values: rows, errors: {} }, { status: 200 });
  const saved = orNotFound(await saveDraft(person, params.specificationId, form));
  if (!saved.ok) return data(saved.state, { status: 400 });
  return redirect(href("/specifications/:specificationId", { specificationId: saved.value.publicId }));
}

export default function SpecificationEdit({ loaderData, actionData }: Route.ComponentProps) {
  const { number, letter, publicId, savedAt, timeZone } = loaderData;
  return (
    <Page>
      <TitleBlock
        heading={{ number, title: loaderData.values.title ?? "" }}
        numberLabel="Specification"
        cells={[
          { label: "Revision", value: letter },
          { label: "Status", value: "draft" },
        ]}
        facts={[{ label: "Saved", value: <Instant at={savedAt} zone={timeZone} /> }]}
      />
      <SpecificationEditor
        values={loaderData.values}
        state={actionData}
        idempotencyKey={loaderData.idempotencyKey}
        releasedNumbers={loaderData.releasedNumbers}
        backTo={href("/specifications/:specificationId", { specificationId: publicId })}
        name={`${number} ${letter}`}
      />
    </Page>
  );
}
