// A new RFQ, written for the released revision of a specification.
import { data, href, Link, redirect } from "react-router";
import { LinkButton } from "~/components/button";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { editSweeps } from "~/components/measurement-plan-fields";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { RfqForm } from "~/components/rfq-form";
import { TitleBlock } from "~/components/title-block";
import { formValues } from "~/forms/fields";
import { parseRfqForm } from "~/forms/rfq";
import { timeZones } from "~/forms/time-zones";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { createRfq, listReleasedSpecifications, proposeRfq } from "~/services/rfqs.server";
import type { Route } from "./+types/rfq-new";

export const meta: Route.MetaFunction = () => [{ title: "New RFQ · Tenderband" }];

const chosen = (request: Request) => new URL(request.url).searchParams.get("specification");

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = requireRight(context, request, "manage-rfq");
  const specification = chosen(request);
  if (specification === null) return { proposal: null, released: await listReleasedSpecifications(person) };
  const proposal = orNotFound(await proposeRfq(person, specification));
  return { proposal, zones: timeZones(proposal.values.dueZone), idempotencyKey: newIdempotencyKey() };
}

export async function action({ request, context }: Route.ActionArgs) {
  const person = requireRight(context, request, "manage-rfq");
  const form = await request.formData();
  const rows = editSweeps(formValues(form));
  if (rows) return data({ values: rows, errors: {} }, { status: 200 });
  const read = parseRfqForm(form, { now: new Date() });
  if (!read.ok) return data({ values: read.values, errors: read.errors }, { status: 400 });
  const key = formValues(form).idempotencyKey ?? "";
  const made = orNotFound(await createRfq(person, key, chosen(request) ?? "", read.value));
  if (!made.ok) return data({ values: formValues(form), errors: made.errors }, { status: 400 });
  return redirect(href("/rfqs/:rfqId/invitations", { rfqId: made.value.publicId }));
}

export default function RfqNew({ loaderData, actionData }: Route.ComponentProps) {
  if (loaderData.proposal === null) return <ChooseSpecification released={loaderData.released} />;
  const { proposal, zones, idempotencyKey } = loaderData;
  const { specification } = proposal;
  return (
    <Page>
      <TitleBlock
        heading={{ title: "New RFQ" }}
        cells={[{ label: "Status", value: "not saved" }]}
        facts={[
          { label: "Specification", value: <SpecificationLink specification={specification} /> },
          { label: "Title of the specification", value: specification.title },
          { label: "Currency", value: proposal.values.currency },
        ]}
      />
      {proposal.refusal === null ? (
        <RfqForm
          state={actionData ?? { values: proposal.values, errors: {} }}
          zones={zones}
          idempotencyKey={idempotencyKey}
          save="Save the draft"
          beside={<span className="text-13 text-quiet">Suppliers are chosen next. Nothing is mailed yet.</span>}
        />
      ) : (
        <Section title="No RFQ can be written for this specification">
          <Notice tone="near">{proposal.refusal}</Notice>
        </Section>
      )}
    </Page>
  );
}

interface Subject {
  readonly publicId: string;
  readonly number: string;
  readonly letter: string;
  readonly title: string;
}

function SpecificationLink({ specification }: { specification: Subject }) {
  const { publicId: specificationId, letter, number } = specification;
  return (
    <Link to={href("/specifications/:specificationId/revisions/:letter", { specificationId, letter })}>
      {number} {letter}
    </Link>
  );
}

function ChooseSpecification({ released }: { released: readonly Subject[] }) {
  return (
    <Page>
      <TitleBlock heading={{ title: "New RFQ" }} />
      <Section title="For which specification?" note="An RFQ refers to one released revision.">
        {released.length === 0 ? (
          <Empty
            sentence="No specification is released yet. Release one first."
            verb={<LinkButton to={href("/specifications")}>Specifications</LinkButton>}
          />
        ) : (
          <Table label="Released specifications">
            <thead>
              <tr>
                <HeadCell>Number</HeadCell>
                <HeadCell>Revision</HeadCell>
                <HeadCell>Title</HeadCell>
              </tr>
            </thead>
            <tbody>
              {released.map(({ publicId, number, letter, title }) => (
                <Row key={publicId}>
                  <RowHead>
                    <Link to={`${href("/rfqs/new")}?specification=${publicId}`}>{number}</Link>
                  </RowHead>
                  <Cell>{letter}</Cell>
                  <Cell>{title}</Cell>
                </Row>
              ))}
            </tbody>
          </Table>
        )}
      </Section>
    </Page>
  );
}
