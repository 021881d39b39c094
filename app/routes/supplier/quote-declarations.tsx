// Declarations of a quote: comply or exception to each line that is not measured.
import { data, redirect } from "react-router";
import { LinkButton } from "~/components/button";
import { Empty } from "~/components/empty";
import { Page, Section } from "~/components/page";
import { DeclarationFields } from "~/components/quote-declaration-fields";
import { QuoteDraftForm } from "~/components/quote-draft-form";
import { QuoteStateNotice } from "~/components/quote-state-notice";
import { quoteSheetAddress, SupplierQuoteBlock } from "~/components/supplier-quote-block";
import { readSheet, saveSheet } from "~/services/quote-sheets.server";
import { orNotFound, requireRight } from "~/services/request.server";
import type { Route } from "./+types/quote-declarations";

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Declarations, quote to ${loaderData.head.rfqNumber} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-own-quote");
  return orNotFound(await readSheet(person, params.quoteId, "declarations", request.url));
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-quote");
  const form = await request.formData();
  const outcome = orNotFound(await saveSheet(person, params.quoteId, "declarations", form));
  if (outcome !== "in-order") return data(outcome, { status: 400 });
  const next = form.get("intent") === "continue" ? "Review" : "Declarations";
  return redirect(`${quoteSheetAddress(next, params.quoteId)}${next === "Declarations" ? "?saved=1" : ""}`);
}

export default function QuoteDeclarations({ loaderData, actionData }: Route.ComponentProps) {
  const { head, terms, errors, wasSaved } = loaderData;
  return (
    <Page>
      <SupplierQuoteBlock head={head} sheet="Declarations" />
      <QuoteStateNotice head={head} />
      {terms.declared.length === 0 ? (
        <Empty
          className="mt-9"
          title="Nothing to declare"
          sentence="Every line of this specification is measured."
          verb={<LinkButton to={quoteSheetAddress("Review", head.publicId)}>Review</LinkButton>}
        />
      ) : (
        <QuoteDraftForm
          values={terms.values}
          errors={errors}
          lockVersion={terms.lockVersion}
          answer={actionData}
          wasSaved={wasSaved}
          canEdit={head.refusal === null}
        >
          <Section
            title="Lines you declare"
            note="An exception counts as fail until the buyer accepts it. Say what you offer instead."
          >
            <DeclarationFields lines={terms.declared} />
          </Section>
        </QuoteDraftForm>
      )}
    </Page>
  );
}
