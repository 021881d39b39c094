// The comparison as its address asks for it: at which quantity, in which order; and the address of another view.
export const COMPARISON_SORTS = ["supplier", "margin", "cost", "lead"] as const;
export type ComparisonSort = (typeof COMPARISON_SORTS)[number];

export interface ComparisonQuery {
  /** Among the RFQ's breaks; null: the asked one. */
  readonly quantity: number | null;
  readonly sort: ComparisonSort;
  readonly direction: "ascending" | "descending";
}

export const DEFAULT_COMPARISON: ComparisonQuery = { quantity: null, sort: "cost", direction: "ascending" };

/** Reads `?quantity=1000&sort=lead&direction=descending`; what is unknown counts as absent. */
export function readComparisonQuery(search: URLSearchParams): ComparisonQuery {
  const quantity = search.get("quantity") ?? "";
  return {
    quantity: /^[1-9]\d{0,8}$/.test(quantity) ? Number(quantity) : null,
    sort: COMPARISON_SORTS.find((sort) => sort === search.get("sort")) ?? DEFAULT_COMPARISON.sort,
    direction: search.get("direction") === "descending" ? "descending" : "ascending",
  };
}

/** The search part of the address of a view, without what is the default anyway: "" or "?quantity=1000". */
export function comparisonSearch({ quantity, sort, direction }: ComparisonQuery): string {
  const search = new URLSearchParams();
  if (quantity !== null) search.set("quantity", String(quantity));
  if (sort !== DEFAULT_COMPARISON.sort || direction !== DEFAULT_COMPARISON.direction) {
    search.set("sort", sort);
    search.set("direction", direction);
  }
  const text = search.toString();
  return text === "" ? "" : `?${text}`;
}
