// The link of an invitation's mail: moves its token out of the address and uses nothing up, so that a mail scanner may follow it.
import { href, redirect } from "react-router";
import { keepLinkToken, LINK_HEADERS } from "~/services/link-cookie.server";
import type { Route } from "./+types/invitation-link";

export const loader = async ({ params }: Route.LoaderArgs) =>
  redirect(href("/invitation"), {
    headers: { ...LINK_HEADERS, "Set-Cookie": await keepLinkToken("invitation", params.token) },
  });
