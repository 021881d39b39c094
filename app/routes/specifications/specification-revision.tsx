// One revision of a specification, as it stands or as it stood.
import { href, Link } from "react-router";
import { LinkButton } from "~/components/button";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { TitleBlock } from "~/components/title-block";
import { orNotFound, requireRight } from "~/services/request.server";
import { readSpecificationView } from "~/services/specification-view.server";
import { readSpecification } from "~/services/specifications.server";
import { may } from "~/workflow/roles";
import { canSpecification, specificationRefusal } from "~/workflow/specification";
import type { Route } from "./+types/specification-revision";
import { revisionFacts, Revisions, SpecificationSheet, UsedIn } from "./specification-sheet";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData.view.number} ${loaderData.view.letter} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-specification");
  const { revisions, rfqs } = orNotFound(await readSpecification(person, params.specificationId));
  const { id, contentHash, letter } = orNotFound(revisions.find((revision) => revision.letter === params.letter));
  return {
    view: orNotFound(await readSpecificationView(person, id)),
    latest: revisions[0]?.letter ?? letter,
    contentHash,
    revisions: revisions.map(({ id: _id, version: _version, ...revision }) => revision),
    rfqs: rfqs.filter((rfq) => rfq.letter === letter),
    timeZone: person.timeZone,
    mayRequest: may(person.role, "manage-rfq"),
  };
}

export default function SpecificationRevision({ loaderData }: Route.ComponentProps) {
  const { view, latest, contentHash, revisions, rfqs, timeZone } = loaderData;
  const specificationId = view.publicId;
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
        actions={
          loaderData.mayRequest && canSpecification("open-rfq", view.status) ? (
            <LinkButton to={`${href("/rfqs/new")}?specification=${specificationId}`} kind="filled">
              Request quotes
            </LinkButton>
          ) : undefined
        }
      />
      {view.letter === latest ? null : (
        <Notice tone={view.status === "superseded" ? "near" : "edge"} className="mt-6">
          {specificationRefusal("edit", view.status)}{" "}
          <Link to={href("/specifications/:specificationId", { specificationId })}>Latest revision, {latest}</Link>
        </Notice>
      )}
      <SpecificationSheet view={view} />
      <Revisions publicId={specificationId} revisions={revisions} shown={view.letter} zone={timeZone} />
      <UsedIn rfqs={rfqs} zone={timeZone} />
      {contentHash === null ? null : (
        <Section title="Content">
          <p className="text-13 break-all text-quiet">SHA-256 {contentHash}</p>
        </Section>
      )}
    </Page>
  );
}
