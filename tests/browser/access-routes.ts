// Every address of the product, made from app/routes.ts, and who may find something there.
import type { RouteConfigEntry } from "@react-router/dev/routes";
import routes from "../../app/routes";

export interface Address {
  /** "/rfqs/:rfqId/history" */
  readonly pattern: string;
  readonly file: string;
  /** The area's layout, as its file; "" for what everybody reaches. */
  readonly area: string;
}

/** Routes with an element of their own, with the layout that guards them. */
export const ADDRESSES: readonly Address[] = flatten(routes, "", "");

function flatten(entries: readonly RouteConfigEntry[], parent: string, area: string): Address[] {
  return entries.flatMap((entry) => {
    const pattern = entry.path === undefined ? parent : `${parent}/${entry.path}`;
    if (entry.children) return flatten(entry.children, pattern, entry.path === undefined ? entry.file : area);
    return [{ pattern: pattern === "" ? "/" : pattern, file: entry.file, area }];
  });
}

const BUYER = "routes/open-points/buyer-layout.tsx";
const SUPPLIER = "routes/supplier/layout.tsx";
const ANYBODY = "routes/account/layout.tsx";

/** Kinds of ids of the demo that addresses carry. */
export type IdName = "specification" | "rfq" | "quote" | "invitation" | "measurement" | "file";

export interface IdRule {
  readonly id: IdName;
  /** The document's own form, as somebody who knows it would post it; absent where nothing is posted. */
  readonly post?: Readonly<Record<string, string>>;
  /** A route without a page of its own. */
  readonly resource?: true;
  /** Nothing is read by GET. */
  readonly postOnly?: true;
}

const KEY = "walk-walk-walk-walk";

/** Complete and in order, so that nothing but the id is wrong with it. */
const RFQ_FORM = {
  title: "Taken over",
  "breaks.0": "10",
  askedQuantity: "10",
  dueDate: "2099-12-31",
  dueTime: "12:00",
  dueZone: "Europe/Berlin",
  decisionRule: "simple",
  currency: "EUR",
  lockVersion: "1",
};

const RECOMMENDATION = {
  intent: "recommend",
  quoteId: "0123456789abcdef",
  reason: "This is not mine to recommend at all.",
  idempotencyKey: KEY,
};

/** What the walk tries on each route that carries an id. */
const ID_RULES: Readonly<Record<string, IdRule>> = {
  "/specifications/:specificationId": { id: "specification", post: { intent: "revise", idempotencyKey: KEY } },
  "/specifications/:specificationId/edit": { id: "specification", post: { intent: "save", title: "Taken over" } },
  "/specifications/:specificationId/revisions/:letter": { id: "specification" },
  "/rfqs/:rfqId": { id: "rfq", post: { intent: "cancel", reason: "Not mine to cancel", idempotencyKey: KEY } },
  "/rfqs/:rfqId/edit": { id: "rfq", post: RFQ_FORM },
  "/rfqs/:rfqId/invitations": { id: "rfq", post: { intent: "revoke", invitation: "0123456789abcdef" } },
  "/rfqs/:rfqId/comparison": { id: "rfq" },
  "/rfqs/:rfqId/decision": { id: "rfq", post: RECOMMENDATION },
  "/rfqs/:rfqId/history": { id: "rfq" },
  "/quotes/:quoteId": { id: "quote" },
  "/quotes/:quoteId/curves": { id: "quote" },
  "/quotes/:quoteId/outlook": { id: "quote" },
  "/quotes/:quoteId/terms": { id: "quote" },
  "/quotes/:quoteId/files": { id: "quote" },
  "/supplier/invitations/:invitationId": { id: "invitation", post: { intent: "start" } },
  "/supplier/quotes/:quoteId": { id: "quote", post: { intent: "save" } },
  "/supplier/quotes/:quoteId/terms": { id: "quote", post: { intent: "save", nre: "1", lockVersion: "1" } },
  "/supplier/quotes/:quoteId/declarations": { id: "quote", post: { intent: "save", lockVersion: "1" } },
  "/supplier/quotes/:quoteId/review": { id: "quote", post: { intent: "submit", idempotencyKey: KEY } },
  "/supplier/quotes/:quoteId/results": { id: "quote" },
  "/files/:fileId": { id: "file", resource: true },
  "/api/v1/quotes/:quoteId/measurements": { id: "quote", resource: true, post: { intent: "upload" } },
  "/api/v1/quotes/:quoteId/progress": { id: "quote", resource: true },
  "/api/v1/quotes/:quoteId/traces": { id: "quote", resource: true },
  "/api/v1/quotes/:quoteId/curves": { id: "quote", resource: true },
  "/api/v1/measurements/:measurementId": {
    id: "measurement",
    resource: true,
    postOnly: true,
    post: { intent: "remove" },
  },
};

/** Addresses whose parameter is a secret or leads to the local mailbox: no row of a tenant hangs on them. */
const OTHER_PARAMETERS = ["/password-reset/:token", "/invitation/:token", "/development/mailbox/:mailId"];

const PUBLIC = [
  "/",
  "/health",
  "/theme",
  "/sign-in",
  "/sign-out",
  "/forgotten-password",
  "/password-reset",
  "/invitation",
  "/development/mailbox",
  "/*",
];

export type Standing =
  | { readonly kind: "public" }
  | { readonly kind: "secret" }
  | { readonly kind: "page"; readonly for: "buyer" | "supplier" | "anybody" }
  | { readonly kind: "id"; readonly for: "buyer" | "supplier" | "anybody"; readonly rule: IdRule };

/** @throws Error for a route nobody has thought of here */
export function standingOf({ pattern, area }: Address): Standing {
  const audience = area === BUYER ? "buyer" : area === SUPPLIER ? "supplier" : area === ANYBODY ? "anybody" : null;
  const rule = ID_RULES[pattern];
  if (audience && rule) return { kind: "id", for: audience, rule };
  if (audience && !pattern.includes(":")) return { kind: "page", for: audience };
  if (!audience && OTHER_PARAMETERS.includes(pattern)) return { kind: "secret" };
  if (!audience && PUBLIC.includes(pattern)) return { kind: "public" };
  throw new Error(`the walk has no rule for ${pattern} (${area || "no area"}): add one to access-routes.ts`);
}

/** The address with its id in place. */
export const addressOf = (pattern: string, id: string): string =>
  pattern.replace(":letter", "A").replace(/:[a-zA-Z]+/, id);
