// The list of RFQs as its address asks for it: filter, sort and page, and the address of another view.
import { RFQ_STATES, type RfqState } from "~/workflow/rfq";

export const RFQ_SORTS = ["number", "title", "due", "quantity"] as const;
export type RfqSort = (typeof RFQ_SORTS)[number];

export interface RfqListQuery {
  /** null: every state. */
  readonly state: RfqState | null;
  readonly sort: RfqSort;
  readonly direction: "ascending" | "descending";
  /** From 1. */
  readonly page: number;
}

export const DEFAULT_RFQ_LIST: RfqListQuery = { state: null, sort: "number", direction: "descending", page: 1 };

const oneOf = <T extends string>(choices: readonly T[], text: string | null): T | undefined =>
  choices.find((choice) => choice === text);

/** A page's number from an address: 1 for what is none. */
export function readPage(text: string | null): number {
  return text !== null && /^[1-9]\d{0,5}$/.test(text) ? Number(text) : 1;
}

/** Reads `?state=open&sort=due&direction=ascending&page=2`; what is unknown counts as absent. */
export function readRfqListQuery(search: URLSearchParams): RfqListQuery {
  return {
    state: oneOf(RFQ_STATES, search.get("state")) ?? null,
    sort: oneOf(RFQ_SORTS, search.get("sort")) ?? DEFAULT_RFQ_LIST.sort,
    direction:
      oneOf(["ascending", "descending"] as const, search.get("direction")) ??
      (search.has("sort") ? "ascending" : DEFAULT_RFQ_LIST.direction),
    page: readPage(search.get("page")),
  };
}

/** The search part of the address of a view, without what is the default anyway: "" or "?state=open". */
export function rfqListSearch(query: RfqListQuery): string {
  const search = new URLSearchParams();
  if (query.state) search.set("state", query.state);
  if (query.sort !== DEFAULT_RFQ_LIST.sort || query.direction !== DEFAULT_RFQ_LIST.direction) {
    search.set("sort", query.sort);
    search.set("direction", query.direction);
  }
  if (query.page > 1) search.set("page", String(query.page));
  const text = search.toString();
  return text === "" ? "" : `?${text}`;
}
