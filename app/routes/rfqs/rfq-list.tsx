// The buyer's RFQs: by state, sorted, page by page, all of it in the address.
import { href, Link } from "react-router";
import { LinkButton } from "~/components/button";
import { Cell, HeadCell, Row, RowHead, Table, TwoLines } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { Instant } from "~/components/figure";
import { formatNumber } from "~/components/format";
import { Page, Section } from "~/components/page";
import { ListViews, Pager } from "~/components/list-pager";
import { TitleBlock } from "~/components/title-block";
import { readRfqListQuery, rfqListSearch, type RfqListQuery, type RfqSort } from "~/forms/rfq-list";
import { requireRight } from "~/services/request.server";
import { listRfqs } from "~/services/rfq-list.server";
import { RFQ_STATES } from "~/workflow/rfq";
import { may } from "~/workflow/roles";
import type { Route } from "./+types/rfq-list";

export const meta: Route.MetaFunction = () => [{ title: "RFQs · Tenderband" }];

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-rfq");
  const query = readRfqListQuery(new URL(request.url).searchParams);
  return { query, list: await listRfqs(person, query), mayWrite: may(person.role, "manage-rfq") };
}

const address = (query: RfqListQuery) => href("/rfqs") + rfqListSearch(query);

/** The other direction where the column sorts already, else its first. */
function sortLink(query: RfqListQuery, sort: RfqSort) {
  const isCurrent = query.sort === sort;
  const turned = isCurrent && query.direction === "ascending" ? "descending" : "ascending";
  return {
    to: address({ ...query, sort, direction: turned, page: 1 }),
    ...(isCurrent ? { direction: query.direction } : {}),
  };
}

export default function RfqList({ loaderData }: Route.ComponentProps) {
  const { query, list, mayWrite } = loaderData;
  const all = Object.values(list.counts).reduce((sum, count) => sum + count, 0);
  const create = mayWrite ? (
    <LinkButton kind="filled" to={href("/rfqs/new")}>
      New RFQ
    </LinkButton>
  ) : undefined;
  return (
    <Page>
      <TitleBlock heading={{ title: "RFQs", caption: "List" }} actions={create} />
      <ListViews
        label="RFQs by state"
        views={[
          {
            label: "All",
            count: all,
            to: address({ ...query, state: null, page: 1 }),
            isCurrent: query.state === null,
          },
          ...RFQ_STATES.map((state) => ({
            label: state,
            count: list.counts[state],
            to: address({ ...query, state, page: 1 }),
            isCurrent: query.state === state,
          })),
        ]}
      />
      <Section title={query.state === null ? "All RFQs" : `RFQs: ${query.state}`}>
        {list.entries.length === 0 ? (
          <Empty
            sentence={
              all === 0 ? "No RFQ yet. One is written for a released specification." : "No RFQ is in this view."
            }
          />
        ) : (
          <RfqTable list={list} query={query} />
        )}
        <Pager page={query.page} pages={list.pages} to={(page) => address({ ...query, page })} />
      </Section>
    </Page>
  );
}

function RfqTable({ list, query }: { list: Route.ComponentProps["loaderData"]["list"]; query: RfqListQuery }) {
  return (
    <Table label="RFQs" rows="two-line" stacks className="tablet:min-w-230">
      <thead>
        <tr>
          <HeadCell sort={sortLink(query, "number")}>Number</HeadCell>
          <HeadCell sort={sortLink(query, "title")}>Title</HeadCell>
          <HeadCell>Status</HeadCell>
          <HeadCell sort={sortLink(query, "due")}>Due</HeadCell>
          <HeadCell figure sort={sortLink(query, "quantity")}>
            Quantity
          </HeadCell>
          <HeadCell figure>Quotes</HeadCell>
        </tr>
      </thead>
      <tbody>
        {list.entries.map((rfq) => (
          <Row key={rfq.publicId}>
            <RowHead className="whitespace-nowrap">
              <Link to={href("/rfqs/:rfqId", { rfqId: rfq.publicId })}>{rfq.number}</Link>
            </RowHead>
            <Cell className="max-tablet:order-1 max-tablet:col-span-2">
              <TwoLines upper={rfq.title} lower={`${rfq.specification} · ${rfq.ownerName}`} />
            </Cell>
            <Cell className="max-tablet:text-right">{rfq.state}</Cell>
            <Cell className="whitespace-nowrap max-tablet:order-2 max-tablet:col-span-2" data-label="Due">
              <Instant at={rfq.dueAt} zone={rfq.dueZone} {...(rfq.state === "open" ? { now: list.now } : {})} />
            </Cell>
            <Cell figure className="max-tablet:order-3 max-tablet:text-left!" data-label="Quantity">
              {formatNumber(rfq.quantity, 0)}
            </Cell>
            <Cell figure className="max-tablet:order-4" data-label="Quotes">
              {rfq.quotes.submitted} of {rfq.quotes.invited}
            </Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}
