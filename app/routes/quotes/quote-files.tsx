// One quote's files: what was measured on which unit, with sizes and hashes, to be downloaded as they were uploaded.
import { href } from "react-router";
import { celsiusWords } from "~/components/compliance-words";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { formatBand, formatNumber } from "~/components/format";
import { Page, Section } from "~/components/page";
import { QuoteBlock } from "~/components/quote-block";
import { orNotFound, requireRight } from "~/services/request.server";
import { readQuoteFiles } from "~/services/quote-terms-view.server";
import { readSubmittedHead } from "~/services/submitted-quotes.server";
import type { Route } from "./+types/quote-files";

export const meta: Route.MetaFunction = ({ loaderData: { head } }) => [
  { title: `Files, ${head.supplierName}, ${head.rfq.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-results");
  const head = orNotFound(await readSubmittedHead(person, params.quoteId));
  return { head, files: orNotFound(await readQuoteFiles(person, params.quoteId)) };
}

export default function QuoteFiles({ loaderData }: Route.ComponentProps) {
  const { head, files } = loaderData;
  return (
    <Page>
      <QuoteBlock head={head} />
      <Section title="Files" note="As they were uploaded. The hash is SHA-256 of the bytes.">
        {files.length === 0 ? (
          <Empty sentence="This version was submitted without files." />
        ) : (
          <Table label="Files" rows="two-line">
            <thead>
              <tr>
                <HeadCell>File</HeadCell>
                <HeadCell>Unit</HeadCell>
                <HeadCell figure>Temperature</HeadCell>
                <HeadCell figure>Points</HeadCell>
                <HeadCell figure>Range</HeadCell>
                <HeadCell figure>Size, kB</HeadCell>
                <HeadCell className="pl-4">SHA-256</HeadCell>
              </tr>
            </thead>
            <tbody>
              {files.map(({ publicId, name, size, sha256, sweep }) => (
                <Row key={publicId}>
                  <RowHead className="whitespace-nowrap">
                    <a href={href("/files/:fileId", { fileId: publicId })} download>
                      {name}
                    </a>
                  </RowHead>
                  <Cell className="whitespace-nowrap">{sweep?.unit ?? "–"}</Cell>
                  <Cell figure>{sweep ? celsiusWords(sweep.celsius) : "–"}</Cell>
                  <Cell figure>{sweep ? formatNumber(sweep.points, 0) : "–"}</Cell>
                  <Cell figure>{sweep ? formatBand(sweep.range) : "–"}</Cell>
                  <Cell figure>{formatNumber(size / 1000, 1)}</Cell>
                  <Cell className="pl-4 text-12 break-all">{sha256}</Cell>
                </Row>
              ))}
            </tbody>
          </Table>
        )}
      </Section>
    </Page>
  );
}
