// All specifications of the buyer, each by its latest revision.
import { href, Link } from "react-router";
import { LinkButton } from "~/components/button";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { Instant } from "~/components/figure";
import { Page } from "~/components/page";
import { ListViews, Pager } from "~/components/list-pager";
import { TitleBlock } from "~/components/title-block";
import { requireRight } from "~/services/request.server";
import { LIST_SORTS, listSpecifications, type SpecificationListQuery } from "~/services/specifications.server";
import { may } from "~/workflow/roles";
import type { Route } from "./+types/specification-list";

export const meta: Route.MetaFunction = () => [{ title: "Specifications · Tenderband" }];

type Sort = (typeof LIST_SORTS)[number];
interface View {
  readonly status: "draft" | "released" | undefined;
  readonly sort: Sort;
  readonly descending: boolean;
  readonly page: number;
}

/** The address is the state; what it does not say, or says wrongly, stands at its usual. */
function readView(search: URLSearchParams): View {
  const status = search.get("status");
  const sort = search.get("sort") ?? "";
  const name = sort.replace(/^-/, "");
  const known = LIST_SORTS.find((offered) => offered === name);
  return {
    status: status === "draft" || status === "released" ? status : undefined,
    sort: known ?? "number",
    descending: known === undefined || sort.startsWith("-"),
    page: Math.max(1, Math.trunc(Number(search.get("page"))) || 1),
  };
}

function address(view: View): string {
  const search = new URLSearchParams();
  if (view.status) search.set("status", view.status);
  const sort = `${view.descending ? "-" : ""}${view.sort}`;
  if (sort !== "-number") search.set("sort", sort);
  if (view.page > 1) search.set("page", String(view.page));
  return search.size === 0 ? href("/specifications") : `${href("/specifications")}?${search.toString()}`;
}

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-specification");
  const asked = readView(new URL(request.url).searchParams);
  const query: SpecificationListQuery = { ...asked, ...(asked.status ? { status: asked.status } : {}) };
  const list = await listSpecifications(person, query);
  const view = { ...asked, page: list.page };
  return { ...list, view, timeZone: person.timeZone, mayWrite: may(person.role, "write-specification") };
}

export default function SpecificationList({ loaderData }: Route.ComponentProps) {
  const { rows, counts, view, page, pages, timeZone, mayWrite } = loaderData;
  const newSpecification = (
    <LinkButton to={href("/specifications/new")} kind="filled">
      New specification
    </LinkButton>
  );
  return (
    <Page>
      <TitleBlock
        heading={{ title: "Specifications" }}
        titleLabel="List"
        actions={mayWrite && counts.all > 0 ? newSpecification : undefined}
      />
      {counts.all === 0 ? (
        <Empty
          className="mt-9"
          title="No specification yet"
          sentence="A specification says what the filter has to do: loss, rejection, match and temperature, line by line."
          verb={mayWrite ? newSpecification : undefined}
        />
      ) : (
        <>
          <ListViews
            label="Specifications by status"
            views={VIEWS.map(({ status, label, count }) => ({
              label,
              count: counts[count],
              to: address({ ...view, status, page: 1 }),
              isCurrent: view.status === status,
            }))}
          />
          {rows.length === 0 ? (
            <Empty
              className="mt-6"
              sentence={`No specification has a latest revision that is ${view.status ?? "there"}.`}
            />
          ) : (
            <Table label="Specifications" stacks className="mt-4">
              <thead>
                <tr>
                  <SortHead view={view} by="number">
                    Number
                  </SortHead>
                  <SortHead view={view} by="title">
                    Title
                  </SortHead>
                  <HeadCell>Revision</HeadCell>
                  <SortHead view={view} by="status">
                    Status
                  </SortHead>
                  <HeadCell>Owner</HeadCell>
                  <SortHead view={view} by="saved">
                    Saved
                  </SortHead>
                </tr>
              </thead>
              <tbody>
                {rows.map((row) => (
                  <Row key={row.publicId}>
                    <RowHead className="whitespace-nowrap">
                      <Link to={href("/specifications/:specificationId", { specificationId: row.publicId })}>
                        {row.number}
                      </Link>
                    </RowHead>
                    <Cell className="max-tablet:order-1 max-tablet:col-span-2 tablet:min-w-44">{row.title}</Cell>
                    <Cell className="max-tablet:order-3 max-tablet:text-right" data-label="Revision">
                      {row.letter}
                    </Cell>
                    <Cell className="max-tablet:text-right">{row.status}</Cell>
                    <Cell className="max-tablet:order-4 max-tablet:col-span-2">{row.ownerName}</Cell>
                    <Cell className="whitespace-nowrap max-tablet:order-2" data-label="Saved">
                      <Instant at={row.savedAt} zone={timeZone} />
                    </Cell>
                  </Row>
                ))}
              </tbody>
            </Table>
          )}
          <Pager page={page} pages={pages} to={(to) => address({ ...view, page: to })} />
        </>
      )}
    </Page>
  );
}

function SortHead({ view, by, children }: { view: View; by: Sort; children: string }) {
  const isSorting = view.sort === by;
  const to = address({ ...view, sort: by, descending: isSorting ? !view.descending : false, page: 1 });
  const direction = view.descending ? ("descending" as const) : ("ascending" as const);
  return <HeadCell sort={{ to, ...(isSorting ? { direction } : {}) }}>{children}</HeadCell>;
}

const VIEWS = [
  { status: undefined, label: "All", count: "all" },
  { status: "draft", label: "draft", count: "draft" },
  { status: "released", label: "released", count: "released" },
] as const;
