// Keeps the reader's choice of light or dark and goes back to where it was made.
import { redirect } from "react-router";
import { notFound, safeReturn } from "~/services/request.server";
import { writeTheme } from "~/services/theme.server";
import type { Route } from "./+types/theme";

export function loader() {
  throw notFound();
}

export async function action({ request }: Route.ActionArgs) {
  const form = await request.formData();
  return redirect(safeReturn(form.get("returnTo")), { headers: { "Set-Cookie": await writeTheme(form.get("theme")) } });
}
