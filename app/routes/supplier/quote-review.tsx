// Review of a quote before it is submitted: every answer, what is missing, and the button that freezes a version.
import { data, redirect } from "react-router";
import { Button, LinkButton } from "~/components/button";
import { PostForm } from "~/components/form";
import { Page, Section, Split } from "~/components/page";
import { MeasurementList } from "~/components/measurement-list";
import { DataAsked } from "~/components/quote-data-asked";
import { QuoteMissing } from "~/components/quote-missing";
import { QuoteStateNotice } from "~/components/quote-state-notice";
import { DeclarationsView, SetupView, TermsView } from "~/components/quote-terms-view";
import { quoteSheetAddress, SupplierQuoteBlock } from "~/components/supplier-quote-block";
import { formValues } from "~/forms/fields";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { listMeasurements } from "~/services/measurement-list.server";
import { reviewQuote, submitQuote } from "~/services/quote-submission.server";
import { readQuoteTerms } from "~/services/quote-terms.server";
import { readQuoteHead } from "~/services/quotes.server";
import { orNotFound, requireRight } from "~/services/request.server";
import type { Route } from "./+types/quote-review";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Review, quote to ${loaderData.head.rfqNumber} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-own-quote");
  const head = orNotFound(await readQuoteHead(person, params.quoteId));
  const { declared, assumedSetup } = orNotFound(await readQuoteTerms(person, params.quoteId));
  return {
    head,
    declared,
    assumedSetup,
    list: orNotFound(await listMeasurements(person, params.quoteId)),
    review: orNotFound(await reviewQuote(person, params.quoteId)),
    idempotencyKey: newIdempotencyKey(),
  };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "submit-quote");
  const { idempotencyKey = "", savedAt = "" } = formValues(await request.formData());
  const outcome = orNotFound(await submitQuote(person, params.quoteId, idempotencyKey, savedAt));
  if (outcome.ok) return redirect(quoteSheetAddress("Results", params.quoteId));
  return data({ values: {}, errors: { form: outcome.errors.form ?? [STILL_MISSING] } }, { status: 400 });
}

const STILL_MISSING = "Something is still missing: it is listed on this page.";

export default function QuoteReview({ loaderData, actionData }: Route.ComponentProps) {
  const { head, list, review, declared, assumedSetup } = loaderData;
  const edit = (sheet: "Data" | "Terms" | "Declarations") =>
    head.refusal === null ? (
      <LinkButton kind="plain" to={quoteSheetAddress(sheet, head.publicId)}>
        Change
      </LinkButton>
    ) : undefined;
  return (
    <Page>
      <SupplierQuoteBlock head={head} sheet="Review" />
      <QuoteStateNotice head={head} />
      <QuoteMissing quoteId={head.publicId} errors={review.errors} declared={declared} />
      <Section
        title={list.entries.length === 1 ? "1 measured file" : `${list.entries.length} measured files`}
        tools={edit("Data")}
      >
        <DataAsked asked={list.asked} />
        {list.entries.length === 0 ? null : (
          <div className="mt-4">
            <MeasurementList entries={list.entries} scoring={list.scoring} canEdit={false} />
          </div>
        )}
      </Section>
      {review.terms === null ? null : (
        <>
          <Split>
            <Section title="Terms" tools={edit("Terms")}>
              <TermsView terms={review.terms} />
            </Section>
            <Section title="Measurement setup" tools={edit("Data")}>
              <SetupView stated={review.terms} assumed={assumedSetup} />
            </Section>
          </Split>
          {declared.length === 0 ? null : (
            <Section title="Declarations" tools={edit("Declarations")}>
              <DeclarationsView terms={review.terms} declared={declared} />
            </Section>
          )}
        </>
      )}
      {head.refusal === null ? <Submit {...loaderData} state={actionData} /> : null}
    </Page>
  );
}

type SubmitProps = Pick<Route.ComponentProps["loaderData"], "head" | "review" | "idempotencyKey"> & {
  state: Route.ComponentProps["actionData"];
};

function Submit({ head, review, idempotencyKey, state }: SubmitProps) {
  const isComplete = Object.keys(review.errors).length === 0;
  return (
    <Section title={head.version === 0 ? "Submit" : `Submit version ${head.version + 1}`}>
      <PostForm state={state} idempotencyKey={idempotencyKey}>
        <input type="hidden" name="savedAt" value={head.savedAt} />
        <p className="max-w-170 text-13">
          The buyer sees data, terms and declarations as they stand, and both sides are mailed the results. You may
          submit again until the due date; the last version counts.
        </p>
        <div className="mt-4 flex flex-wrap items-center gap-4">
          <Button kind="filled" disabled={!isComplete} name="intent" value="submit">
            Submit quote
          </Button>
          {isComplete ? null : <p className="text-13 text-quiet">What is missing is listed on top.</p>}
        </div>
      </PostForm>
    </Section>
  );
}
