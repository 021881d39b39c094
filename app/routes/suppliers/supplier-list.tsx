// The supplier directory: companies that were invited, with status and contacts.
import { data, href, redirect } from "react-router";
import { Button } from "~/components/button";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { PostForm } from "~/components/form";
import { Page, Section } from "~/components/page";
import { ListViews, Pager } from "~/components/list-pager";
import { TitleBlock } from "~/components/title-block";
import { readPage } from "~/forms/rfq-list";
import { parseSupplierStatusForm } from "~/forms/rfq-steps";
import { SUPPLIER_STATUSES, type SupplierStatus } from "~/forms/supplier-status";
import { orNotFound, requireRight } from "~/services/request.server";
import { listSuppliers, setSupplierStatus } from "~/services/suppliers.server";
import { may } from "~/workflow/roles";
import type { Route } from "./+types/supplier-list";

export const meta: Route.MetaFunction = () => [{ title: "Suppliers · Tenderband" }];

function readQuery(request: Request) {
  const search = new URL(request.url).searchParams;
  const status = SUPPLIER_STATUSES.find((known) => known === search.get("status")) ?? null;
  return { status, page: readPage(search.get("page")) };
}

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-suppliers");
  const query = readQuery(request);
  return { query, directory: await listSuppliers(person, query), mayWrite: may(person.role, "write-suppliers") };
}

export async function action({ request, context }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-suppliers");
  const read = parseSupplierStatusForm(await request.formData());
  if (!read.ok) return data({ values: read.values, errors: read.errors }, { status: 400 });
  orNotFound(await setSupplierStatus(person, read.value.supplier, read.value.status));
  return redirect(address(readQuery(request)));
}

function address({ status, page }: { status: SupplierStatus | null; page: number }): string {
  const search = new URLSearchParams();
  if (status !== null) search.set("status", status);
  if (page > 1) search.set("page", String(page));
  const text = search.toString();
  return href("/suppliers") + (text === "" ? "" : `?${text}`);
}

export default function SupplierList({ loaderData }: Route.ComponentProps) {
  const { query, directory, mayWrite } = loaderData;
  const all = Object.values(directory.counts).reduce((sum, count) => sum + count, 0);
  return (
    <Page>
      <TitleBlock heading={{ title: "Suppliers", caption: "Directory" }} />
      <ListViews
        label="Suppliers by status"
        views={[
          { label: "All", count: all, to: address({ status: null, page: 1 }), isCurrent: query.status === null },
          ...SUPPLIER_STATUSES.map((status) => ({
            label: status,
            count: directory.counts[status],
            to: address({ status, page: 1 }),
            isCurrent: query.status === status,
          })),
        ]}
      />
      <Section title="Directory" note="A company enters when it is first invited. A blocked one is not invited again.">
        {directory.entries.length === 0 ? (
          <Empty
            sentence={
              all === 0 ? "No supplier yet. Companies enter as you invite them to an RFQ." : "Nobody is in this view."
            }
          />
        ) : (
          <SupplierTable entries={directory.entries} mayWrite={mayWrite} />
        )}
        <Pager page={query.page} pages={directory.pages} to={(page) => address({ ...query, page })} />
      </Section>
    </Page>
  );
}

type Entries = Route.ComponentProps["loaderData"]["directory"]["entries"];

function SupplierTable({ entries, mayWrite }: { entries: Entries; mayWrite: boolean }) {
  return (
    <Table label="Suppliers" stacks className="tablet:min-w-220">
      <thead>
        <tr>
          <HeadCell>Company</HeadCell>
          <HeadCell>Contacts</HeadCell>
          <HeadCell figure>RFQs invited to</HeadCell>
          <HeadCell className="pl-10">Status</HeadCell>
        </tr>
      </thead>
      <tbody>
        {entries.map((entry) => (
          <Row key={entry.publicId}>
            <RowHead>{entry.name}</RowHead>
            <Cell className="max-tablet:order-1 max-tablet:col-span-2">{entry.contacts.join(", ")}</Cell>
            <Cell figure data-label="RFQs invited to">
              {entry.invitedTo}
            </Cell>
            <Cell className="max-tablet:order-2 max-tablet:col-span-2 max-tablet:mt-2 tablet:w-90 tablet:pl-10">
              {mayWrite ? <StatusForm entry={entry} /> : entry.status}
            </Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}

function StatusForm({ entry }: { entry: Entries[number] }) {
  return (
    <PostForm>
      <input type="hidden" name="supplier" value={entry.publicId} />
      <div role="group" aria-label={`Status of ${entry.name}`} className="-ml-2 flex">
        {SUPPLIER_STATUSES.map((status) => (
          <Button
            key={status}
            kind="plain"
            name="status"
            value={status}
            aria-pressed={status === entry.status}
            className="aria-pressed:font-bold aria-pressed:text-ink"
          >
            {status}
          </Button>
        ))}
      </div>
    </PostForm>
  );
}
