// The eleven rules of Incoterms 2020 and the ones that fit sea and inland waterway transport only.
export const INCOTERMS = ["EXW", "FCA", "CPT", "CIP", "DAP", "DPU", "DDP", "FAS", "FOB", "CFR", "CIF"] as const;

export type Incoterm = (typeof INCOTERMS)[number];

export const isIncoterm = (code: string): code is Incoterm => (INCOTERMS as readonly string[]).includes(code);

/** FAS, FOB, CFR and CIF are for goods handed over at or on a ship; the named place is then a port. */
export const isWaterwayOnly = (rule: Incoterm): boolean => ["FAS", "FOB", "CFR", "CIF"].includes(rule);
