// One quote's outlook: what its units say of a production, what temperature does to them, and how well they match.
import { OutlookProduction } from "~/components/outlook-production";
import { OutlookTemperature } from "~/components/outlook-temperature";
import { MatchingSection } from "~/components/outlook-matching";
import { ComplianceProgress } from "~/components/compliance-progress";
import { Page } from "~/components/page";
import { QuoteBlock } from "~/components/quote-block";
import { readOutlookQuery } from "~/forms/outlook";
import { readQuoteOutlook } from "~/services/quote-outlook.server";
import { orNotFound, requireRight } from "~/services/request.server";
import type { Route } from "./+types/quote-outlook";

export const meta: Route.MetaFunction = ({ loaderData: { head } }) => [
  { title: `Outlook, ${head.supplierName}, ${head.rfq.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-results");
  const query = readOutlookQuery(new URL(request.url).searchParams);
  return orNotFound(await readQuoteOutlook(person, params.quoteId, query));
}

export default function QuoteOutlook({ loaderData: { head, outlook } }: Route.ComponentProps) {
  if (outlook === null)
    return (
      <Page>
        <QuoteBlock head={head} />
        <ComplianceProgress quoteId={head.publicId} />
      </Page>
    );
  return (
    <Page>
      <QuoteBlock head={head} />
      <OutlookProduction {...outlook} basis={head.basis} />
      <OutlookTemperature {...outlook} rule={head.decisionRule} />
      <MatchingSection matching={outlook.matching} />
    </Page>
  );
}
