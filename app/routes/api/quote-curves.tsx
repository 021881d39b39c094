// Curves of one measurement of a quote for its plots, as JSON.
import { data } from "react-router";
import { orNotFound, requirePerson, requireRight } from "~/services/request.server";
import { readSubmittedHead } from "~/services/submitted-quotes.server";
import type { Route } from "./+types/quote-curves";

export async function loader({ request, context, params }: Route.LoaderArgs) {
  requirePerson(context, request, "buyer"); // to a supplier this address leads nowhere, whatever its id
  const person = requireRight(context, request, "read-results");
  orNotFound(await readSubmittedHead(person, params.quoteId));
  return data({});
}
