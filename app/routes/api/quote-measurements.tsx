// The files of a supplier's quote: listed, and uploaded one or many at once.
import { data } from "react-router";
import { listMeasurements } from "~/services/measurement-list.server";
import { uploadMeasurements } from "~/services/measurement-uploads.server";
import { orNotFound, requirePerson } from "~/services/request.server";
import type { Route } from "./+types/quote-measurements";

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const person = requirePerson(context, request, "supplier");
  return orNotFound(await listMeasurements(person, params.quoteId));
}

/** 201 with every file stored; 400 with the sentence beside each refused one; 413 where the request was too large. */
export async function action({ context, request, params }: Route.ActionArgs) {
  const person = requirePerson(context, request, "supplier");
  const outcome = orNotFound(await uploadMeasurements(person, params.quoteId, request));
  if (!outcome.ok) return data({ error: outcome.error, files: [] }, { status: outcome.status });
  const refused = outcome.value.some(({ error }) => error !== undefined);
  return data({ files: outcome.value }, { status: refused ? 400 : 201 });
}
