// All that reads a Request: who asks, by which rights, and what the form holds.
import { createContext, data, redirect, type MiddlewareFunction, type RouterContextProvider } from "react-router";
import type { Verb } from "~/workflow/roles";
import { may } from "~/workflow/roles";
import type { Person } from "./person.server";
import { readSession } from "./sessions.server";

export interface RequestFacts {
  readonly requestId: string;
  readonly nonce: string;
  readonly ip?: string;
}

export const requestFactsContext = createContext<RequestFacts>();
const personContext = createContext<Person | null>(null);

type Context = Readonly<RouterContextProvider>;

/** The signed-in person, or null. */
export const currentPerson = (context: Context): Person | null => context.get(personContext);

/** Middleware of the root: reads the session once a request. */
export const identify: MiddlewareFunction<Response> = async ({ request, context }) => {
  const { requestId, ip } = context.get(requestFactsContext);
  context.set(personContext, await readSession(request, requestId, ip));
};

/** Middleware of the root: what a signed-in person reads is kept by no cache. */
export const noStore: MiddlewareFunction<Response> = async ({ context }, next) => {
  const response = await next();
  if (currentPerson(context) || response.status >= 400) response.headers.set("Cache-Control", "no-store");
  return response;
};

const FORM = /^(application\/x-www-form-urlencoded\b|multipart\/form-data;.*\bboundary=)/i;

/** Middleware of the root: what is sent here is a form; anything else would fail in the action that reads it. */
export const refuseOtherBodies: MiddlewareFunction<Response> = ({ request }) => {
  if (request.method === "GET" || request.method === "HEAD" || request.method === "OPTIONS") return;
  if (!FORM.test(request.headers.get("Content-Type") ?? "")) throw data("Not a form", { status: 400 });
};

/** What an address that leads nowhere answers, alike for what is absent and what is somebody else's. */
export const notFound = () => data("Not found", { status: 404 });

function signInAddress(request: Request): string {
  const url = new URL(request.url);
  const target = request.method === "GET" ? url.pathname.replace(/\.data$/, "") + url.search : "/";
  return `/sign-in?returnTo=${encodeURIComponent(target)}`;
}

/** The person, if signed in with an organisation of this kind. Throws a redirect to sign in, or 404. */
export function requirePerson(context: Context, request: Request, kind?: "buyer" | "supplier"): Person {
  const person = currentPerson(context);
  if (!person) throw redirect(signInAddress(request));
  if (kind && person.organisationKind !== kind) throw notFound();
  return person;
}

/** Middleware of an area: lets in people of one kind of organisation. */
export const onlyFor =
  (kind?: "buyer" | "supplier"): MiddlewareFunction<Response> =>
  ({ request, context }) => {
    requirePerson(context, request, kind);
  };

/** The person, if the role may do this. Throws 403 for a role that may not. */
export function requireRight(context: Context, request: Request, verb: Verb): Person {
  const person = requirePerson(context, request);
  if (!may(person.role, verb)) throw data("Your role does not allow this", { status: 403 });
  return person;
}

/** The value, or a thrown 404 for null: what the scoping hook hides is not there. */
export function orNotFound<T>(value: T | null | undefined): T {
  if (value === null || value === undefined) throw notFound();
  return value;
}

const LOCAL = /^\/(?!\/)[\x21-\x5b\x5d-\x7e]{0,1999}$/;

/** A target inside this site, else the fallback: never an address that leads elsewhere. */
export function safeReturn(target: FormDataEntryValue | string | null | undefined, fallback = "/"): string {
  if (typeof target !== "string" || !LOCAL.test(target)) return fallback;
  const url = new URL(target, "http://local.invalid");
  const local = url.pathname + url.search + url.hash;
  // Once more: without its dots "/..//elsewhere.example" is "//elsewhere.example", which is another site.
  return url.origin === "http://local.invalid" && LOCAL.test(local) ? local : fallback;
}
