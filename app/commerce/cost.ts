// What a quote costs at the asked quantity: minimum, order multiple, price break, NRE.
import { add, compare, multiply, printExact, subtract } from "./money.ts";

export interface PriceBreak {
  readonly quantity: number;
  /** Decimal text, more than 0. */
  readonly unitPrice: string;
}

export interface CostInput {
  /** In any order, each quantity once. */
  readonly prices: readonly PriceBreak[];
  readonly asked: number;
  /** Smallest quantity the supplier sells; absent = 1. */
  readonly minimum?: number | null;
  /** Sold in multiples of this; absent = 1. */
  readonly multiple?: number | null;
  /** Decimal text, 0 or more. */
  readonly nre: string;
}

/** All amounts as exact decimal text in the quote's currency. */
export interface Cost {
  readonly boughtQuantity: number;
  readonly unitPrice: string;
  /** boughtQuantity × unitPrice. */
  readonly goods: string;
  readonly nre: string;
  /** NRE + goods. */
  readonly total: string;
}

export interface ComparedCost extends Cost {
  /** A higher break that costs less in all, the cheapest such; of equals the smaller quantity. */
  readonly cheaperBreak?: Cost & { readonly saving: string };
}

/**
 * Compared cost at the asked quantity. Bought = max(asked, minimum) rounded up to the multiple; its price is that of the largest break not
 * above it.
 * @returns null where no break reaches down to the bought quantity: the quote has no price
 * @throws RangeError for a quantity that is not a whole number of 1 or more, or an amount that is not decimal text
 */
export function compareCost(input: CostInput): ComparedCost | null {
  const minimum = input.minimum ?? 1;
  const multiple = input.multiple ?? 1;
  for (const quantity of [input.asked, minimum, multiple, ...input.prices.map((price) => price.quantity)]) {
    if (!Number.isSafeInteger(quantity) || quantity < 1) throw new RangeError(`${quantity} is not a quantity`);
  }
  const buy = (quantity: number) => costOf(Math.ceil(Math.max(quantity, minimum) / multiple) * multiple, input);
  const cost = buy(input.asked);
  if (!cost) return null;

  let cheaper: Cost | undefined;
  for (const price of [...input.prices].sort((a, b) => a.quantity - b.quantity)) {
    const candidate = price.quantity > cost.boughtQuantity ? buy(price.quantity) : null;
    if (candidate && compare(candidate.total, (cheaper ?? cost).total) < 0) cheaper = candidate;
  }
  return cheaper ? { ...cost, cheaperBreak: { ...cheaper, saving: subtract(cost.total, cheaper.total) } } : cost;
}

function costOf(boughtQuantity: number, { prices, nre }: CostInput): Cost | null {
  const reached = prices.filter((price) => price.quantity <= boughtQuantity);
  const [first, ...others] = reached;
  if (!first) return null;
  const { unitPrice } = others.reduce((best, price) => (price.quantity > best.quantity ? price : best), first);
  const goods = multiply(unitPrice, boughtQuantity);
  return { boughtQuantity, unitPrice: printExact(unitPrice), goods, nre: printExact(nre), total: add(nre, goods) };
}
