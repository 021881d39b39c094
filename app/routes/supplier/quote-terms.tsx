// Terms of a quote: prices, delivery and conditions.
import { data, redirect } from "react-router";
import { Page } from "~/components/page";
import { QuoteDraftForm } from "~/components/quote-draft-form";
import { QuoteStateNotice } from "~/components/quote-state-notice";
import { ConditionFields, DeliveryFields, PriceFields } from "~/components/quote-terms-fields";
import { quoteSheetAddress, SupplierQuoteBlock } from "~/components/supplier-quote-block";
import { readSheet, saveSheet } from "~/services/quote-sheets.server";
import { orNotFound, requireRight } from "~/services/request.server";
import type { Route } from "./+types/quote-terms";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Terms, quote to ${loaderData.head.rfqNumber} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-own-quote");
  return orNotFound(await readSheet(person, params.quoteId, "terms", request.url));
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-quote");
  const form = await request.formData();
  const outcome = orNotFound(await saveSheet(person, params.quoteId, "terms", form));
  if (outcome !== "in-order") return data(outcome, { status: 400 });
  const next = form.get("intent") === "continue" ? "Declarations" : "Terms";
  return redirect(`${quoteSheetAddress(next, params.quoteId)}${next === "Terms" ? "?saved=1" : ""}`);
}

export default function QuoteTerms({ loaderData, actionData }: Route.ComponentProps) {
  const { head, terms, errors, wasSaved } = loaderData;
  return (
    <Page>
      <SupplierQuoteBlock head={head} sheet="Terms" />
      <QuoteStateNotice head={head} />
      <QuoteDraftForm
        values={terms.values}
        errors={errors}
        lockVersion={terms.lockVersion}
        answer={actionData}
        wasSaved={wasSaved}
        canEdit={head.refusal === null}
      >
        <PriceFields breaks={terms.breaks} quantity={terms.quantity} currency={terms.currency} />
        <DeliveryFields />
        <ConditionFields />
      </QuoteDraftForm>
    </Page>
  );
}
