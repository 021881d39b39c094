// Measured data of a quote: files uploaded and listed, each with its unit, its temperature and how it scores.
import { useCallback, useEffect } from "react";
import { data, href, redirect, useFetcher } from "react-router";
import { LinkButton } from "~/components/button";
import { Empty } from "~/components/empty";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { DataAsked } from "~/components/quote-data-asked";
import { QuoteStateNotice } from "~/components/quote-state-notice";
import { SupplierQuoteBlock, quoteSheetAddress } from "~/components/supplier-quote-block";
import { UploadList } from "~/components/upload-list";
import { UploadPanel } from "~/components/upload-panel";
import { formValues } from "~/forms/fields";
import { labelMeasurements, removeMeasurement } from "~/services/measurement-changes.server";
import { listMeasurements } from "~/services/measurement-list.server";
import { uploadMeasurements } from "~/services/measurement-uploads.server";
import type { Person } from "~/services/person.server";
import { readQuoteHead } from "~/services/quotes.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { isMultipart } from "~/services/uploads.server";
import type { loader as listLoader } from "../api/quote-measurements";
import type { Route } from "./+types/quote-data";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Data, quote to ${loaderData.head.rfqNumber} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-own-quote");
  const head = orNotFound(await readQuoteHead(person, params.quoteId));
  return { head, list: orNotFound(await listMeasurements(person, params.quoteId)) };
}

/** What the forms send without script; with it the same goes through the API, file by file. */
export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-quote");
  const refusal = isMultipart(request)
    ? await takeUpload(person, params.quoteId, request)
    : await takeChange(person, params.quoteId, formValues(await request.formData()));
  return refusal ?? redirect(href("/supplier/quotes/:quoteId", params));
}

async function takeUpload(person: Person, quoteId: string, request: Request) {
  const outcome = orNotFound(await uploadMeasurements(person, quoteId, request));
  if (!outcome.ok) return data({ refused: [outcome.error], errors: {} }, { status: outcome.status });
  const refused = outcome.value.flatMap(({ name, error }) => (error === undefined ? [] : [`${name}: ${error}`]));
  return refused.length === 0 ? null : data({ refused, errors: {} }, { status: 400 });
}

async function takeChange(person: Person, quoteId: string, values: Record<string, string>) {
  const removed = /^remove:(\w+)$/.exec(values.intent ?? "")?.[1];
  const outcome = orNotFound(
    removed ? await removeMeasurement(person, removed) : await labelMeasurements(person, quoteId, values),
  );
  if (outcome.ok) return null;
  return data({ refused: outcome.errors.form ?? [], errors: outcome.errors }, { status: 400 });
}

export default function QuoteData({ loaderData, actionData }: Route.ComponentProps) {
  const { head } = loaderData;
  const address = href("/api/v1/quotes/:quoteId/measurements", { quoteId: head.publicId });
  const fetcher = useFetcher<typeof listLoader>();
  const { load } = fetcher;
  const refresh = useCallback(() => void load(address), [load, address]);
  useEffect(refresh, [refresh]);
  const { entries, asked } = fetcher.data ?? loaderData.list;
  const canEdit = head.refusal === null;
  return (
    <Page>
      <SupplierQuoteBlock
        head={head}
        sheet="Data"
        actions={
          canEdit ? (
            <LinkButton kind="filled" to={quoteSheetAddress("Terms", head.publicId)}>
              Continue to terms
            </LinkButton>
          ) : undefined
        }
      />
      <QuoteStateNotice head={head} />
      {actionData?.refused.length ? (
        <Notice tone="fail" role="alert" className="mt-6">
          {actionData.refused.map((sentence) => (
            <p key={sentence}>{sentence}</p>
          ))}
        </Notice>
      ) : null}
      {canEdit ? (
        <Section
          title="Upload"
          note="Two-port files only. A file that cannot be read is refused whole, with the line and the remedy."
        >
          <UploadPanel address={address} onStored={refresh} />
        </Section>
      ) : null}
      <Section
        title={entries.length === 1 ? "1 measured file" : `${entries.length} measured files`}
        note="Each scored by itself with the setup the RFQ assumes; what your terms state of the setup counts once you submit."
      >
        <DataAsked asked={asked} />
        <div className="mt-4">
          {entries.length === 0 ? (
            <Empty title="No data yet" sentence="Upload at least one measured file. Each is scored at once." />
          ) : (
            <UploadList entries={entries} canEdit={canEdit} errors={actionData?.errors} />
          )}
        </div>
      </Section>
    </Page>
  );
}
