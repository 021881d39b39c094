// The bytes of an uploaded file as they came.
import { downloadHeaders, openFile } from "~/services/file-download.server";
import { orNotFound, requirePerson } from "~/services/request.server";
import type { Route } from "./+types/file-download";

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const person = requirePerson(context, request);
  const file = orNotFound(await openFile(person, params.fileId));
  return new Response(file.body, { headers: downloadHeaders(file) });
}
