// The measured curves of a quote for its overlay plot, as JSON: `?unit=…&temperature=…` stand out, with S12 by `reverse=1`; `from` and `to` in Hz are drawn finer.
import { data } from "react-router";
import { orNotFound, requirePerson, requireRight } from "~/services/request.server";
import { readQuoteTraces, type TraceQuery } from "~/services/quote-traces.server";
import type { Route } from "./+types/quote-traces";

export async function loader({ request, context, params }: Route.LoaderArgs) {
  requirePerson(context, request, "buyer"); // to a supplier this address leads nowhere, whatever its id
  const person = requireRight(context, request, "read-results");
  const traces = orNotFound(
    await readQuoteTraces(person, params.quoteId, readQuery(new URL(request.url).searchParams)),
  );
  return data({ traces });
}

/** What does not read as a figure counts as absent. */
function readQuery(search: URLSearchParams): TraceQuery {
  const figure = (name: string) => {
    const text = search.get(name);
    const value = text === null || text.trim() === "" ? NaN : Number(text);
    return Number.isFinite(value) ? value : undefined;
  };
  const [from, to] = [figure("from"), figure("to")];
  return {
    unit: search.get("unit") ?? undefined,
    temperature: figure("temperature"),
    reverse: search.get("reverse") === "1",
    window: from !== undefined && to !== undefined && from < to ? [from, to] : undefined,
  };
}
