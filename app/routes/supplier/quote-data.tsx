// Measured data of a quote: files uploaded and placed under unit and temperature, what is still missing, and the setup of the measurement.
import { useCallback, useEffect } from "react";
import { data, href, redirect, useFetcher, useSearchParams, type ShouldRevalidateFunctionArgs } from "react-router";
import { Empty } from "~/components/empty";
import { EvidenceGrid } from "~/components/evidence-grid";
import { MeasurementList } from "~/components/measurement-list";
import type { PlacingAnswer } from "~/components/measurement-placing";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { QuoteDraftForm } from "~/components/quote-draft-form";
import { QuoteSetupFields } from "~/components/quote-setup-fields";
import { QuoteStateNotice } from "~/components/quote-state-notice";
import { SupplierQuoteBlock, quoteSheetAddress } from "~/components/supplier-quote-block";
import { UploadPanel } from "~/components/upload-panel";
import { formValues, type FormValues } from "~/forms/fields";
import { parsePlacement, parseSweepSetup } from "~/forms/measurement";
import { readCheckFrame } from "~/services/check-frame.server";
import {
  labelMeasurements,
  placeMeasurements,
  removeMeasurement,
  setMeasurementSetup,
} from "~/services/measurement-changes.server";
import { listMeasurements } from "~/services/measurement-list.server";
import { uploadMeasurements } from "~/services/measurement-uploads.server";
import type { Person } from "~/services/person.server";
import { readSheet, saveSheet } from "~/services/quote-sheets.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { isMultipart } from "~/services/uploads.server";
import type { loader as listLoader } from "../api/quote-measurements";
import type { Route } from "./+types/quote-data";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Data, quote to ${loaderData.head.rfqNumber} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-own-quote");
  const { quoteId } = params;
  return {
    ...orNotFound(await readSheet(person, quoteId, "data", request.url)),
    frame: orNotFound(await readCheckFrame(person, quoteId)),
    list: orNotFound(await listMeasurements(person, quoteId)),
  };
}

/** Opening a sweep's setup reads nothing anew. */
export function shouldRevalidate({
  currentUrl,
  nextUrl,
  formMethod,
  defaultShouldRevalidate,
}: ShouldRevalidateFunctionArgs) {
  const isOtherPage = currentUrl.pathname !== nextUrl.pathname;
  if (formMethod !== undefined || isOtherPage || currentUrl.href === nextUrl.href) return defaultShouldRevalidate;
  return apartFromSetup(currentUrl) !== apartFromSetup(nextUrl);
}

function apartFromSetup({ searchParams }: URL): string {
  const rest = new URLSearchParams(searchParams);
  rest.delete("setup");
  return rest.toString();
}

/** What the page's forms send: files without script, places and setups of sweeps, and the setup of the quote. */
export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-quote");
  const { quoteId } = params;
  const back = href("/supplier/quotes/:quoteId", params);
  if (isMultipart(request)) return (await takeUpload(person, quoteId, request)) ?? redirect(back);
  const form = await request.formData();
  const values = formValues(form);
  const { intent = "" } = values;
  if (intent === "continue" || intent === "save") return takeSetup(person, quoteId, form, intent);
  const [verb = "", id = ""] = intent.split(":");
  if (verb === "setup") return (await takeSweepSetup(person, id, values)) ?? redirect(`${back}#file-${id}`);
  const answer = verb === "remove" ? await takeRemoval(person, id) : await takePlaces(person, quoteId, verb, values);
  if (Object.keys(answer.errors).length > 0)
    return data({ form: "files" as const, refused: answer.errors.form ?? [], ...answer }, { status: 400 });
  return "stay" in values ? data({ form: "files" as const, refused: [], ...answer }) : redirect(back);
}

async function takeUpload(person: Person, quoteId: string, request: Request) {
  const outcome = orNotFound(await uploadMeasurements(person, quoteId, request));
  const refused = outcome.ok
    ? outcome.value.flatMap(({ name, error }) => (error === undefined ? [] : [`${name}: ${error}`]))
    : [outcome.error];
  if (refused.length === 0) return null;
  return data({ form: "files" as const, refused, errors: {} }, { status: outcome.ok ? 400 : outcome.status });
}

async function takeSetup(person: Person, quoteId: string, form: FormData, intent: "continue" | "save") {
  const outcome = orNotFound(await saveSheet(person, quoteId, "data", form));
  if (outcome !== "in-order") return data({ form: "setup" as const, ...outcome }, { status: 400 });
  const address = quoteSheetAddress(intent === "continue" ? "Terms" : "Data", quoteId);
  return redirect(intent === "continue" ? address : `${address}?saved=1#measurement-setup`);
}

async function takeSweepSetup(person: Person, id: string, values: FormValues) {
  const parsed = parseSweepSetup(values);
  const outcome = parsed.ok ? orNotFound(await setMeasurementSetup(person, id, parsed.value)) : parsed;
  if (outcome.ok) return null;
  return data({ form: "sweep" as const, id, values, errors: outcome.errors }, { status: 400 });
}

async function takeRemoval(person: Person, id: string): Promise<PlacingAnswer> {
  const removed = orNotFound(await removeMeasurement(person, id));
  return { errors: removed.ok ? {} : removed.errors };
}

async function takePlaces(person: Person, quoteId: string, verb: string, values: FormValues): Promise<PlacingAnswer> {
  if (verb !== "place") {
    const labelled = orNotFound(await labelMeasurements(person, quoteId, values));
    return labelled.ok ? { errors: {}, labelled: true } : { errors: labelled.errors };
  }
  const parsed = parsePlacement(values);
  const outcome = parsed.ok ? orNotFound(await placeMeasurements(person, quoteId, parsed.value)) : parsed;
  if (!outcome.ok || !parsed.ok) return { errors: outcome.ok ? {} : outcome.errors };
  const { serial, temperature } = parsed.value;
  return { errors: {}, placed: outcome.value, place: { serial, temperature } };
}

const POLL_MILLISECONDS = 2000;

/** The list as the API gives it from now on: read anew after each upload, and while sweeps are being scored. */
function useList(address: string, first: Route.ComponentProps["loaderData"]["list"]) {
  const fetcher = useFetcher<typeof listLoader>();
  const { load } = fetcher;
  const refresh = useCallback(() => void load(address), [load, address]);
  useEffect(refresh, [refresh]);
  const list = fetcher.data ?? first;
  const isPending = list.scoring === "pending";
  useEffect(() => {
    if (!isPending) return;
    const timer = setInterval(refresh, POLL_MILLISECONDS);
    return () => clearInterval(timer);
  }, [isPending, refresh]);
  return { list, refresh };
}

export default function QuoteData({ loaderData, actionData }: Route.ComponentProps) {
  const { head, terms, errors, wasSaved, frame } = loaderData;
  const address = href("/api/v1/quotes/:quoteId/measurements", { quoteId: head.publicId });
  const { list, refresh } = useList(address, loaderData.list);
  const canEdit = head.refusal === null;
  const answer = actionData?.form === "setup" ? actionData : undefined;
  return (
    <Page>
      <SupplierQuoteBlock head={head} sheet="Data" />
      <QuoteStateNotice head={head} />
      {actionData?.form === "files" && actionData.refused.length > 0 ? (
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
          <UploadPanel address={address} frame={frame} onStored={refresh} />
        </Section>
      ) : null}
      <Section
        title="Asked and delivered"
        note="What the RFQ asks of the measured data, unit by unit and temperature by temperature."
      >
        <EvidenceGrid evidence={list.evidence} />
      </Section>
      <Files {...{ list, terms, actionData, canEdit }} />
      <QuoteDraftForm
        values={terms.values}
        errors={errors}
        lockVersion={terms.lockVersion}
        answer={answer}
        wasSaved={wasSaved}
        canEdit={canEdit}
        className="mt-9"
      >
        <QuoteSetupFields assumed={terms.assumedSetup} />
      </QuoteDraftForm>
    </Page>
  );
}

interface FilesProps {
  list: ReturnType<typeof useList>["list"];
  terms: Route.ComponentProps["loaderData"]["terms"];
  actionData: Route.ComponentProps["actionData"];
  canEdit: boolean;
}

function Files({ list: { entries, scoring }, terms, actionData, canEdit }: FilesProps) {
  const [search] = useSearchParams();
  const sweep = actionData?.form === "sweep" ? actionData : undefined;
  const setupOf = canEdit ? (sweep?.id ?? search.get("setup")) : null;
  return (
    <Section
      title={entries.length === 1 ? "1 measured file" : `${entries.length} measured files`}
      note="Each scored by itself with the setup it has. Drag a file onto a unit and temperature, or press Place; tick several to place them together."
    >
      {entries.length === 0 ? (
        <Empty title="No data yet" sentence="Upload at least one measured file. Each is scored at once." />
      ) : (
        <MeasurementList
          entries={entries}
          scoring={scoring}
          canEdit={canEdit}
          errors={actionData?.form === "files" ? actionData.errors : {}}
          setups={{ assumed: terms.assumedSetup, quote: terms.statedSetup }}
          setupOf={setupOf}
          setupState={sweep}
        />
      )}
    </Section>
  );
}
