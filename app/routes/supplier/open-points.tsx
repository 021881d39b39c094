// A supplier's open points: the invitations of all buyers, the most pressing first.
import { href, Link } from "react-router";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { formatDateTime, formatDue } from "~/components/format";
import { Page, Section } from "~/components/page";
import { quoteSheetAddress } from "~/components/supplier-quote-block";
import { TitleBlock } from "~/components/title-block";
import { Verdict, type ShownVerdict } from "~/components/verdict-mark";
import { requireRight } from "~/services/request.server";
import { readSupplierOpenPoints } from "~/services/supplier-open-points.server";
import type { Route } from "./+types/open-points";

export const meta: Route.MetaFunction = () => [{ title: "Open points · Tenderband" }];

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-own-quote");
  return { ...(await readSupplierOpenPoints(person)), organisation: person.organisationName };
}

type Point = Route.ComponentProps["loaderData"]["points"][number];

const GROUPS = [
  { group: "to-answer", title: "Invitations to answer" },
  { group: "draft", title: "Quotes in draft" },
  { group: "submitted", title: "Submitted" },
  { group: "decided", title: "Decided" },
  { group: "missed", title: "Closed without a quote" },
] as const satisfies readonly { group: Point["group"]; title: string }[];

export default function OpenPoints({ loaderData }: Route.ComponentProps) {
  const { points, now, organisation } = loaderData;
  const groups = GROUPS.map((entry) => ({ ...entry, points: points.filter(({ group }) => group === entry.group) }));
  return (
    <Page>
      <TitleBlock
        heading={{ title: "Open points" }}
        titleLabel={organisation}
        facts={groups.map(({ group, title, points: own }) => ({
          label: title,
          value: own.length === 0 ? <span className="text-quiet">none</span> : <a href={`#${group}`}>{own.length}</a>,
        }))}
      />
      {points.length === 0 ? (
        <Empty
          className="mt-9"
          title="No invitation yet"
          sentence="A buyer invites you by mail. Once you accept by the link in it, the RFQ stands here."
        />
      ) : null}
      {groups.map(({ group, title, points: own }) =>
        own.length === 0 ? null : (
          <Section key={group} id={group} title={title}>
            <PointTable label={title} points={own} now={now} />
          </Section>
        ),
      )}
    </Page>
  );
}

function PointTable({ label, points, now }: { label: string; points: readonly Point[]; now: string }) {
  return (
    <Table label={label} rows="two-line" stacks>
      <thead>
        <tr>
          <HeadCell className="w-40">RFQ</HeadCell>
          <HeadCell>Filter</HeadCell>
          <HeadCell className="w-64">Due</HeadCell>
          <HeadCell className="w-48">State</HeadCell>
        </tr>
      </thead>
      <tbody>
        {points.map((point) => (
          <Row key={point.invitation}>
            <RowHead>
              <Link to={addressOf(point)}>{point.rfqNumber}</Link>
            </RowHead>
            <Cell className="max-tablet:order-1 max-tablet:col-span-2 tablet:py-1.5">
              <TwoLines upper={point.title} lower={point.buyerName} />
            </Cell>
            <Cell className="max-tablet:order-2 max-tablet:col-span-2 tablet:py-1.5" data-label="Due">
              <TwoLines
                upper={<time dateTime={point.dueAt}>{formatDateTime(point.dueAt, point.dueZone)}</time>}
                lower={formatDue(point.dueAt, now, point.state === "open")}
              />
            </Cell>
            <Cell>
              <PointState point={point} />
            </Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}

/** Where a point goes on: the invitation before a quote is begun, then the sheet that matters. */
function addressOf({ group, invitation, quote }: Point): string {
  if (quote === null) return href("/supplier/invitations/:invitationId", { invitationId: invitation });
  return quoteSheetAddress(group === "submitted" || group === "decided" ? "Results" : "Data", quote);
}

function PointState({ point: { group, state, outcome, verdict } }: { point: Point }) {
  if (outcome !== null) return <span className="font-semibold">{outcome}</span>;
  if (group !== "submitted") return <span className="text-quiet">{group === "draft" ? "draft" : state}</span>;
  return verdict === null ? (
    <span className="text-quiet">being scored</span>
  ) : (
    <Verdict verdict={verdict as ShownVerdict} />
  );
}
