// The token of a mail's link on its way from the address to the page that uses it: a signed cookie for half an hour.
import { createCookie, type Cookie } from "react-router";
import { config } from "~/config.server";

const MAX_AGE_SECONDS = 30 * 60;
const TOKEN = /^[\w-]{43}$/;

/** What the link is for; each keeps a cookie of its own. */
export type LinkPurpose = "invitation" | "password-reset";

const cookies = new Map<LinkPurpose, Cookie>();

/** At the root, because a narrower path would leave out the page's data address, `/invitation.data`. */
function linkCookie(purpose: LinkPurpose): Cookie {
  const known = cookies.get(purpose);
  if (known) return known;
  const secure = config().appUrl.startsWith("https://");
  const cookie = createCookie(`${secure ? "__Host-" : ""}tenderband-${purpose}`, {
    httpOnly: true,
    secure,
    sameSite: "lax",
    path: "/",
    secrets: config().sessionSecrets,
    maxAge: MAX_AGE_SECONDS,
  });
  cookies.set(purpose, cookie);
  return cookie;
}

/** Of the answer whose address holds the token: kept by no cache, and the address goes to no other page. */
export const LINK_HEADERS = { "Cache-Control": "no-store", "Referrer-Policy": "no-referrer" } as const;

/**
 * Of the page, whose address holds nothing. Under `no-referrer` a form sent without script would carry `Origin: null` and be
 * refused as another site's.
 */
export const LINK_PAGE_HEADERS = { "Cache-Control": "no-store" } as const;

/** The Set-Cookie header that keeps a link's token; what cannot be one is kept as none. */
export const keepLinkToken = (purpose: LinkPurpose, token: string): Promise<string> =>
  TOKEN.test(token) ? linkCookie(purpose).serialize(token) : forgetLinkToken(purpose);

export const forgetLinkToken = (purpose: LinkPurpose): Promise<string> =>
  linkCookie(purpose).serialize("", { maxAge: 0 });

/** The token kept for this browser, or null. */
export async function readLinkToken(purpose: LinkPurpose, request: Request): Promise<string | null> {
  const token: unknown = await linkCookie(purpose).parse(request.headers.get("Cookie"));
  return typeof token === "string" && TOKEN.test(token) ? token : null;
}
