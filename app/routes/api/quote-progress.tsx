// How far the scoring of a quote is, for its supplier and, once submitted, its buyer.
import { orNotFound, requirePerson } from "~/services/request.server";
import { readScoringProgress } from "~/services/scoring-progress.server";
import type { Route } from "./+types/quote-progress";

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const person = requirePerson(context, request);
  return orNotFound(await readScoringProgress(person, params.quoteId));
}
