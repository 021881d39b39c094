// What the document's head asks for first: the typeface of nearly every word, so that text is drawn once.
import latinFont from "@fontsource-variable/manrope/files/manrope-latin-wght-normal.woff2?url";

/** For the root's `links`. */
export const documentLinks = [
  { rel: "preload", href: latinFont, as: "font", type: "font/woff2", crossOrigin: "anonymous" },
] as const;
