// A new specification: typed here, and stored as draft A when it is saved.
import { data, href, redirect } from "react-router";
import { Page } from "~/components/page";
import { BLANK_ROWS, editRows } from "~/components/specification-rows";
import { TitleBlock } from "~/components/title-block";
import { formValues } from "~/forms/fields";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { requireRight } from "~/services/request.server";
import { createSpecification } from "~/services/specifications.server";
import type { Route } from "./+types/specification-new";
import { firstValues, SpecificationEditor } from "./specification-editor";

export const meta: Route.MetaFunction = () => [{ title: "New specification · Tenderband" }];

export function loader({ request, context }: Route.LoaderArgs) {
  const person = requireRight(context, request, "write-specification");
  return { ownerName: person.name, idempotencyKey: newIdempotencyKey() };
}

export async function action({ request, context }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-specification");
  const form = await request.formData();
  const rows = editRows(formValues(form));
  if (rows) return data({ values: rows, errors: {} }, { status: 200 });
  const created = await createSpecification(person, form);
  if (!created.ok) return data(created.state, { status: 400 });
  return redirect(href("/specifications/:specificationId", { specificationId: created.value.publicId }));
}

const blank = firstValues(BLANK_ROWS);

export default function SpecificationNew({ loaderData, actionData }: Route.ComponentProps) {
  return (
    <Page>
      <TitleBlock
        heading={{ title: "New specification" }}
        cells={[
          { label: "Revision", value: "A" },
          { label: "Status", value: "not saved" },
        ]}
        facts={[{ label: "Owner", value: loaderData.ownerName }]}
      />
      <SpecificationEditor
        values={blank}
        state={actionData}
        idempotencyKey={loaderData.idempotencyKey}
        backTo={href("/specifications")}
        name="the new specification"
      />
    </Page>
  );
}
