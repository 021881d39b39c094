// Ends the session; the browser is told to forget what it kept.
import { redirect } from "react-router";
import { notFound } from "~/services/request.server";
import { endSession } from "~/services/sessions.server";
import type { Route } from "./+types/sign-out";

export function loader() {
  throw notFound();
}

export async function action({ request }: Route.ActionArgs) {
  const headers = { "Set-Cookie": await endSession(request), "Clear-Site-Data": '"cache"' };
  return redirect("/sign-in", { headers });
}
