// What happened to an RFQ, latest first.
import { href } from "react-router";
import { Empty } from "~/components/empty";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { RfqBlock } from "~/components/rfq-block";
import { HistoryTable } from "~/components/rfq-history";
import { Pager } from "~/components/list-pager";
import { readPage } from "~/forms/rfq-list";
import { readHistory } from "~/services/history.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { readRfqHead } from "~/services/rfq-head.server";
import type { Route } from "./+types/rfq-history";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `History, ${loaderData.head.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-rfq");
  const page = readPage(new URL(request.url).searchParams.get("page"));
  const head = orNotFound(await readRfqHead(person, params.rfqId));
  return { head, page, history: orNotFound(await readHistory(person, params.rfqId, page)) };
}

export default function RfqHistory({ loaderData }: Route.ComponentProps) {
  const { head, page, history } = loaderData;
  const address = href("/rfqs/:rfqId/history", { rfqId: head.publicId });
  return (
    <Page>
      <RfqBlock head={head} sheet="History" />
      <Section title="History" note={history.isReadable ? `Times in the RFQ's zone, ${head.dueZone}.` : undefined}>
        {history.isReadable ? null : (
          <Notice>
            This RFQ belongs to {head.ownerName}. Engineers read the history of their own RFQs; purchasing and
            administrators read all.
          </Notice>
        )}
        {history.isReadable && history.events.length === 0 ? <Empty sentence="Nothing is on this page." /> : null}
        {history.events.length > 0 ? <HistoryTable events={history.events} zone={head.dueZone} /> : null}
        <Pager page={page} pages={history.pages} to={(next) => `${address}?page=${next}`} />
      </Section>
    </Page>
  );
}
