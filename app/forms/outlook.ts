// The outlook as its address asks for it: which passband, at which temperature, and how phase is compared.
export const MATCHING_PHASES = ["removed", "measured"] as const;
export type MatchingPhase = (typeof MATCHING_PHASES)[number];

export interface OutlookQuery {
  /** "2.1": the line whose passband units are compared over; null: the first. */
  readonly line: string | null;
  /** °C; null: ambient. */
  readonly temperature: number | null;
  /** Constant and delay removed, or phase as measured. */
  readonly phase: MatchingPhase;
}

/** Reads `?line=2.1&temperature=25&phase=measured`; what is unknown counts as absent. */
export function readOutlookQuery(search: URLSearchParams): OutlookQuery {
  const line = search.get("line") ?? "";
  const temperature = search.get("temperature") ?? "";
  return {
    line: /^\d{1,3}\.\d{1,4}$/.test(line) ? line : null,
    temperature: /^-?\d{1,3}(\.\d{1,3})?$/.test(temperature) ? Number(temperature) : null,
    phase: MATCHING_PHASES.find((phase) => phase === search.get("phase")) ?? "removed",
  };
}
