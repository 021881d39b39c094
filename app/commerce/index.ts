// The public face of commerce: money, cost at a quantity, currencies, delivery rules.
export { add, compare, formatAmount, isAmount, multiply, printExact, subtract } from "./money.ts";
export { compareCost, type ComparedCost, type Cost, type CostInput, type PriceBreak } from "./cost.ts";
export { CURRENCIES, isCurrency } from "./currencies.ts";
export { INCOTERMS, isIncoterm, isWaterwayOnly, type Incoterm } from "./incoterms.ts";
