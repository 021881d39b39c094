// A buyer's open points: what needs this person today, the most pressing first.
import type { ReactNode } from "react";
import { href, Link } from "react-router";
import { LinkButton } from "~/components/button";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { formatDateTime, formatDue, formatRelative } from "~/components/format";
import { Page, Section } from "~/components/page";
import { TitleBlock } from "~/components/title-block";
import { readOpenPoints } from "~/services/open-points.server";
import { requireRight } from "~/services/request.server";
import { may } from "~/workflow/roles";
import type { Route } from "./+types/buyer";

export const meta: Route.MetaFunction = () => [{ title: "Open points · Tenderband" }];

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-rfq");
  return {
    points: await readOpenPoints(person),
    timeZone: person.timeZone,
    isOwn: person.role === "engineer",
    mayApprove: may(person.role, "approve-award"),
    mayWrite: may(person.role, "write-specification"),
  };
}

export default function OpenPoints({ loaderData }: Route.ComponentProps) {
  const kinds = kindsOf(loaderData);
  return (
    <Page>
      <TitleBlock
        heading={{ title: "Open points" }}
        titleLabel={loaderData.isOwn ? "Your RFQs" : "All RFQs"}
        facts={kinds.map(({ id, title, count }) => ({
          label: title,
          value: count === 0 ? <span className="text-quiet">none</span> : <a href={`#${id}`}>{count}</a>,
        }))}
      />
      {kinds.every(({ count }) => count === 0) ? <NothingOpen mayWrite={loaderData.mayWrite} /> : null}
      {kinds.map((kind) => (kind.count === 0 ? null : <Kind key={kind.id} {...kind} />))}
    </Page>
  );
}

function NothingOpen({ mayWrite }: { mayWrite: boolean }) {
  const verb = mayWrite ? (
    <LinkButton to={href("/specifications/new")} kind="filled">
      New specification
    </LinkButton>
  ) : (
    <LinkButton to={href("/rfqs")}>All RFQs</LinkButton>
  );
  return (
    <Empty
      className="mt-9"
      title="Nothing is open"
      sentence="Drafts, running RFQs, quotes that arrive and awards to settle are listed here."
      verb={verb}
    />
  );
}

interface PointRow {
  readonly to: string;
  readonly number: string;
  readonly title: string;
  /** Under the title. */
  readonly lower?: string;
  readonly third: string;
  readonly when: ReactNode;
}

interface PointKind {
  readonly id: string;
  readonly title: string;
  readonly count: number;
  readonly rows: readonly PointRow[];
  readonly heads: readonly [number: string, third: string, when: string];
  /** Where all of them are listed. */
  readonly listed?: string;
}

function kindsOf({ points, timeZone, isOwn, mayApprove, mayWrite }: Route.ComponentProps["loaderData"]): PointKind[] {
  const { toApprove, returned, toRecommend, open, quotes, rfqDrafts, specificationDrafts } = points;
  const past = (at: string) => <When at={at} zone={timeZone} now={points.now} />;
  const due = (at: string, zone: string, isRunning: boolean) => (
    <When at={at} zone={timeZone} now={points.now} otherZone={zone} relative={formatDue(at, points.now, isRunning)} />
  );
  const decision = (point: (typeof toApprove.items)[number]) => ({
    to: href("/rfqs/:rfqId/decision", { rfqId: point.rfq.publicId }),
    number: point.rfq.number,
    title: point.rfq.title,
    lower: point.text,
    third: point.byName,
    when: past(point.at),
  });
  const rfq = (sheet: "overview" | "comparison") => (point: (typeof open.items)[number]) => ({
    to: href(sheet === "overview" ? "/rfqs/:rfqId" : "/rfqs/:rfqId/comparison", { rfqId: point.publicId }),
    number: point.number,
    title: point.title,
    ...(isOwn ? {} : { lower: point.ownerName }),
    third: `${point.quotes.submitted} of ${point.quotes.invited} invited`,
    when: due(point.dueAt, point.dueZone, sheet === "overview"),
  });
  const kinds: (PointKind | false)[] = [
    mayApprove && {
      id: "to-approve",
      title: "Awards to approve",
      count: toApprove.count,
      rows: toApprove.items.map(decision),
      heads: ["RFQ", "Recommended by", "Recommended"],
    },
    {
      id: "returned",
      title: "Returned to you",
      count: returned.count,
      rows: returned.items.map(decision),
      heads: ["RFQ", "Returned by", "Returned"],
    },
    {
      id: "to-recommend",
      title: "Closed, to recommend",
      count: toRecommend.count,
      rows: toRecommend.items.map(rfq("comparison")),
      heads: ["RFQ", "Quotes", "Due"],
      listed: `${href("/rfqs")}?state=closed`,
    },
    {
      id: "open-rfqs",
      title: "Open RFQs",
      count: open.count,
      rows: open.items.map(rfq("overview")),
      heads: ["RFQ", "Quotes", "Due"],
      listed: `${href("/rfqs")}?state=open`,
    },
    {
      id: "quotes",
      title: "Quotes arrived",
      count: quotes.count,
      rows: quotes.items.map((quote) => ({
        to: href("/quotes/:quoteId", { quoteId: quote.publicId }),
        number: quote.supplierName,
        title: `${quote.rfq.number} ${quote.rfq.title}`,
        third: `version ${quote.version}`,
        when: past(quote.at),
      })),
      heads: ["Supplier", "Quote", "Submitted"],
    },
    {
      id: "rfq-drafts",
      title: "RFQ drafts to open",
      count: rfqDrafts.count,
      rows: rfqDrafts.items.map((point) => ({
        ...rfq("overview")(point),
        third: point.quotes.invited === 1 ? "1 supplier" : `${point.quotes.invited} suppliers`,
      })),
      heads: ["RFQ", "To invite", "Due"],
      listed: `${href("/rfqs")}?state=draft`,
    },
    mayWrite && {
      id: "specification-drafts",
      title: "Your specification drafts",
      count: specificationDrafts.count,
      rows: specificationDrafts.items.map((draft) => ({
        to: href("/specifications/:specificationId", { specificationId: draft.publicId }),
        number: draft.number,
        title: draft.title,
        third: draft.letter,
        when: past(draft.savedAt),
      })),
      heads: ["Specification", "Revision", "Saved"],
      listed: `${href("/specifications")}?status=draft`,
    },
  ];
  return kinds.filter((kind) => kind !== false);
}

function Kind({ id, title, count, rows, heads, listed }: PointKind) {
  const rest = count - rows.length;
  const [number, third, when] = heads;
  return (
    <Section
      id={id}
      title={
        <>
          {title} <span className="font-normal text-quiet tabular-nums">{count}</span>
        </>
      }
      tools={rest > 0 && listed !== undefined ? <Link to={listed}>{rest} more</Link> : undefined}
    >
      <Table label={title} rows="two-line" stacks className="table-fixed">
        <thead>
          <tr>
            <HeadCell className="w-44">{number}</HeadCell>
            <HeadCell>Title</HeadCell>
            <HeadCell className="w-36 desktop:w-44">{third}</HeadCell>
            <HeadCell className="w-52 desktop:w-58">{when}</HeadCell>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <Row key={row.to}>
              <RowHead>
                <Link to={row.to}>{row.number}</Link>
              </RowHead>
              <Cell className="max-tablet:order-1 max-tablet:col-span-2">
                {row.title}
                {row.lower === undefined ? null : <span className="line-clamp-1 text-12 text-quiet">{row.lower}</span>}
              </Cell>
              <Cell className="max-tablet:text-right">{row.third}</Cell>
              <Cell className="max-tablet:order-2 max-tablet:col-span-2" data-label={when}>
                {row.when}
              </Cell>
            </Row>
          ))}
        </tbody>
      </Table>
    </Section>
  );
}

interface WhenProps {
  at: string;
  /** The reader's. */
  zone: string;
  now: string;
  /** An RFQ's own zone: said too where it differs. */
  otherZone?: string;
  /** @default how far it lies from now */
  relative?: string;
}

function When({ at, zone, now, otherZone = zone, relative = formatRelative(at, now) }: WhenProps) {
  const absolute = formatDateTime(at, zone);
  const other = formatDateTime(at, otherZone);
  return (
    <time dateTime={at}>
      <TwoLines upper={relative} lower={absolute} />
      {other === absolute ? null : <span className="block text-12 text-quiet">{other}</span>}
    </time>
  );
}
