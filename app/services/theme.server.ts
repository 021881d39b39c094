// The reader's choice of light or dark, in a cookie of its own.
import { createCookie } from "react-router";

const themeCookie = createCookie("theme", { path: "/", sameSite: "lax", httpOnly: true, maxAge: 365 * 24 * 60 * 60 });

export type ThemeChoice = "system" | "light" | "dark";

const isTheme = (value: unknown): value is ThemeChoice => value === "system" || value === "light" || value === "dark";

export async function readTheme(request: Request): Promise<ThemeChoice> {
  const value: unknown = await themeCookie.parse(request.headers.get("Cookie"));
  return isTheme(value) ? value : "system";
}

/** The Set-Cookie header that keeps the choice; anything unknown counts as the system's. */
export const writeTheme = (value: unknown): Promise<string> => themeCookie.serialize(isTheme(value) ? value : "system");
