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
          <Table label="Files" rows="two-line" stacks>
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
                  <Cell className="whitespace-nowrap max-tablet:order-1" data-label="Unit">
                    {sweep?.unit ?? "–"}
                  </Cell>
                  <Cell figure className="max-tablet:order-2" data-label="Temperature">
                    {sweep ? celsiusWords(sweep.celsius) : "–"}
                  </Cell>
                  <Cell figure className="max-tablet:order-4" data-label="Points">
                    {sweep ? formatNumber(sweep.points, 0) : "–"}
                  </Cell>
                  <Cell figure className="max-tablet:order-3 max-tablet:text-left!" data-label="Range">
                    {sweep ? formatBand(sweep.range) : "–"}
                  </Cell>
                  <Cell figure className="max-tablet:order-0" data-label="Size, kB">
                    {formatNumber(size / 1000, 1)}
                  </Cell>
                  <Cell
                    className="text-12 break-all max-tablet:order-5 max-tablet:col-span-2 tablet:pl-4"
                    data-label="SHA-256"
                  >
                    {sha256}
                  </Cell>
                </Row>
              ))}
            </tbody>
          </Table>
        )}
      </Section>
    </Page>
  );
}
