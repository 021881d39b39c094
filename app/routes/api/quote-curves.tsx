// Curves of one measurement of a quote as JSON: `?view=margin&unit=…&temperature=…&line=…`; `from` and `to` in Hz are drawn finer. Without a query, which measurements there are.
import { data } from "react-router";
import { readCurveDataQuery } from "~/forms/curves";
import { orNotFound, requirePerson, requireRight } from "~/services/request.server";
import { readCurvePlaces, readQuoteCurves } from "~/services/quote-curves.server";
import type { Route } from "./+types/quote-curves";

export async function loader({ request, context, params }: Route.LoaderArgs) {
  requirePerson(context, request, "buyer"); // to a supplier this address leads nowhere, whatever its id
  const person = requireRight(context, request, "read-results");
  const { searchParams } = new URL(request.url);
  if (searchParams.size === 0) return data({ measurements: orNotFound(await readCurvePlaces(person, params.quoteId)) });
  const query = orNotFound(readCurveDataQuery(searchParams));
  return data(orNotFound(await readQuoteCurves(person, params.quoteId, query)));
}
