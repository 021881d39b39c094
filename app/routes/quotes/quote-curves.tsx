// One quote's curves.
import { Page } from "~/components/page";
import { QuoteBlock } from "~/components/quote-block";
import { orNotFound, requireRight } from "~/services/request.server";
import { readSubmittedHead } from "~/services/submitted-quotes.server";
import type { Route } from "./+types/quote-curves";

export const meta: Route.MetaFunction = ({ loaderData: { head } }) => [
  { title: `Curves, ${head.supplierName}, ${head.rfq.number} · Tenderband` },
];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-results");
  return { head: orNotFound(await readSubmittedHead(person, params.quoteId)) };
}

export default function QuoteCurves({ loaderData: { head } }: Route.ComponentProps) {
  return (
    <Page>
      <QuoteBlock head={head} />
    </Page>
  );
}
