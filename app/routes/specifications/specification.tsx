// A specification by its latest revision: drawing, requirements, revisions, and what can be done with it.
import { data, href, redirect } from "react-router";
import { Button, LinkButton } from "~/components/button";
import { PostForm } from "~/components/form";
import { Notice } from "~/components/notice";
import { Page } from "~/components/page";
import { TitleBlock } from "~/components/title-block";
import { formValues } from "~/forms/fields";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { releaseRevision, reviseSpecification } from "~/services/specification-release.server";
import { readSpecificationView } from "~/services/specification-view.server";
import { readSpecification } from "~/services/specifications.server";
import { may } from "~/workflow/roles";
import { canSpecification } from "~/workflow/specification";
import type { Route } from "./+types/specification";
import { revisionFacts, Revisions, SpecificationSheet, UsedIn } from "./specification-sheet";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData.view.number} ${loaderData.view.letter} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-specification");
  const { revisions, rfqs } = orNotFound(await readSpecification(person, params.specificationId));
  const latest = orNotFound(revisions[0]);
  const view = orNotFound(await readSpecificationView(person, latest.id));
  return {
    view,
    version: latest.version,
    revisions: revisions.map(({ id: _id, version: _version, ...revision }) => revision),
    rfqs,
    timeZone: person.timeZone,
    mayWrite: may(person.role, "write-specification"),
    mayRelease: may(person.role, "release-specification"),
    mayRequest: may(person.role, "manage-rfq"),
    idempotencyKey: newIdempotencyKey(),
  };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-specification");
  const { intent, version = "", idempotencyKey = "" } = formValues(await request.formData());
  const { specificationId } = params;
  switch (intent) {
    case "release": {
      requireRight(context, request, "release-specification");
      const released = orNotFound(await releaseRevision(person, specificationId, { idempotencyKey, version }));
      if (!released.ok) return data({ values: {}, errors: released.errors }, { status: 400 });
      return redirect(href("/specifications/:specificationId", { specificationId }));
    }
    case "revise": {
      const revised = orNotFound(await reviseSpecification(person, specificationId, idempotencyKey));
      if (!revised.ok) return data({ values: {}, errors: revised.errors }, { status: 400 });
      return redirect(href("/specifications/:specificationId/edit", { specificationId }));
    }
    default:
      throw data("Bad request", { status: 400 });
  }
}

export default function Specification({ loaderData, actionData }: Route.ComponentProps) {
  const { view, timeZone, revisions, rfqs } = loaderData;
  return (
    <Page>
      <TitleBlock
        heading={{ number: view.number, title: view.title }}
        numberLabel="Specification"
        cells={[
          { label: "Revision", value: view.letter },
          { label: "Status", value: view.status },
        ]}
        facts={revisionFacts(view, rfqs.length, timeZone)}
        actions={actionsFor(loaderData)}
      />
      {actionData?.errors.form?.map((sentence) => (
        <Notice key={sentence} tone="fail" role="alert" className="mt-6">
          {sentence}
        </Notice>
      ))}
      <SpecificationSheet view={view} />
      <Revisions publicId={view.publicId} revisions={revisions} shown={view.letter} zone={timeZone} />
      <UsedIn rfqs={rfqs} zone={timeZone} />
    </Page>
  );
}

/** What the reader may do with the revision now; undefined where that is nothing, so that the block keeps no empty cell. */
function actionsFor(loaderData: Route.ComponentProps["loaderData"]) {
  const { view, idempotencyKey } = loaderData;
  const canEdit = loaderData.mayWrite && canSpecification("edit", view.status);
  const canRelease = loaderData.mayRelease && canSpecification("release", view.status);
  const canRevise = loaderData.mayWrite && canSpecification("revise", view.status);
  const canRequest = loaderData.mayRequest && canSpecification("open-rfq", view.status);
  if (!canEdit && !canRelease && !canRevise && !canRequest) return undefined;
  const specificationId = view.publicId;
  const post = { idempotencyKey, "aria-label": view.number };
  return (
    <>
      {canEdit ? (
        <LinkButton to={href("/specifications/:specificationId/edit", { specificationId })}>Edit</LinkButton>
      ) : null}
      {canRelease ? (
        <PostForm {...post}>
          <input type="hidden" name="version" value={loaderData.version} />
          <Button kind="filled" name="intent" value="release">
            Release {view.letter}
          </Button>
        </PostForm>
      ) : null}
      {canRevise ? (
        <PostForm {...post}>
          <Button name="intent" value="revise">
            Revise
          </Button>
        </PostForm>
      ) : null}
      {canRequest ? (
        <LinkButton to={`${href("/rfqs/new")}?specification=${specificationId}`} kind="filled">
          Request quotes
        </LinkButton>
      ) : null}
    </>
  );
}
