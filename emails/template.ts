// MJML templates: read and compiled once, then filled with values that are HTML-escaped.
import { readFile } from "node:fs/promises";
import path from "node:path";
import mjml2html from "mjml";

const FOLDER = path.join(import.meta.dirname, "templates");
const SLOT = /\{\{\s*(\w+)\s*\}\}/g;
const ENTITIES: Readonly<Record<string, string>> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "'": "&#39;",
};

/** Markup built by `html`: every value in it is escaped already. */
export class Markup {
  constructor(readonly source: string) {}
}

export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (character) => ENTITIES[character] ?? "");
}

/** Template tag: strings are escaped, markup and lists of markup are kept. */
export function html(parts: TemplateStringsArray, ...values: readonly (string | Markup | readonly Markup[])[]): Markup {
  const source = parts
    .map((part, index) => part + (index < values.length ? toSource(values[index] ?? "") : ""))
    .join("");
  return new Markup(source);
}

function toSource(value: string | Markup | readonly Markup[]): string {
  if (typeof value === "string") return escapeHtml(value);
  return value instanceof Markup ? value.source : value.map((markup) => markup.source).join("");
}

const compiled = new Map<string, Promise<string>>();

/**
 * A template with its slots filled, in one pass: a value that looks like a slot stays text.
 *
 * @throws Error if the template does not compile strictly, or slots and values do not match one to one
 */
export async function fillTemplate(name: string, values: Readonly<Record<string, string | Markup>>): Promise<string> {
  const template = await compile(name);
  const filled = new Set<string>();
  const result = template.replace(SLOT, (_, slot: string) => {
    const value = values[slot];
    if (value === undefined) throw new Error(`Mail template ${name}: no value for {{${slot}}}`);
    filled.add(slot);
    return toSource(value);
  });
  const left = Object.keys(values).filter((slot) => !filled.has(slot));
  if (left.length > 0) throw new Error(`Mail template ${name}: no slot for ${left.join(", ")}`);
  return result;
}

function compile(name: string): Promise<string> {
  const known = compiled.get(name);
  if (known !== undefined) return known;
  const pending = readAndCompile(name);
  compiled.set(name, pending);
  pending.catch(() => compiled.delete(name)); // a file that could not be read once may be readable later
  return pending;
}

async function readAndCompile(name: string): Promise<string> {
  const filePath = path.join(FOLDER, `${name}.mjml`);
  const source = await readFile(filePath, "utf8");
  const options = {
    validationLevel: "strict",
    filePath,
    ignoreIncludes: false,
    keepComments: false,
    fonts: {},
  } as const;
  return (await mjml2html(source, options)).html;
}
