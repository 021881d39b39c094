// The link of a reset mail: moves its token out of the address and uses nothing up, so that a mail scanner may follow it.
import { href, redirect } from "react-router";
import { keepLinkToken, LINK_HEADERS } from "~/services/link-cookie.server";
import type { Route } from "./+types/password-reset-link";

export const loader = async ({ params }: Route.LoaderArgs) =>
  redirect(href("/password-reset"), {
    headers: { ...LINK_HEADERS, "Set-Cookie": await keepLinkToken("password-reset", params.token) },
  });
