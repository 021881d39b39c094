// Keeps the token of a mail's link out of the address: it moves into a short-lived cookie of the page that uses it.
import { createCookie, redirect, type Cookie } from "react-router";
import { config } from "~/config.server";

const THIRTY_MINUTES_S = 30 * 60;
const cookies = new Map<string, Cookie>();

function linkCookie(path: string): Cookie {
  const known = cookies.get(path);
  if (known) return known;
  const cookie = createCookie("link", {
    path,
    httpOnly: true,
    secure: config().appUrl.startsWith("https://"),
    sameSite: "lax",
    secrets: config().sessionSecrets,
    maxAge: THIRTY_MINUTES_S,
  });
  cookies.set(path, cookie);
  return cookie;
}

const PRIVATE = { "Cache-Control": "no-store", "Referrer-Policy": "no-referrer" };

/** Opens a link: remembers its token and goes to the page without it. Consumes nothing, so a mail scanner may follow it. */
export async function moveTokenOutOfAddress(path: string, token: string): Promise<Response> {
  return redirect(path, { headers: { "Set-Cookie": await linkCookie(path).serialize(token), ...PRIVATE } });
}

export async function readLinkToken(path: string, request: Request): Promise<string | null> {
  const token: unknown = await linkCookie(path).parse(request.headers.get("Cookie"));
  return typeof token === "string" && token.length > 0 && token.length <= 200 ? token : null;
}

/** The header that forgets the token. */
export const forgetLinkToken = (path: string): Promise<string> => linkCookie(path).serialize("", { maxAge: 0 });
