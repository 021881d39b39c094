// Check values, section 6: one-sided tolerance factors of a normal sample; section 8: drift from two centres.
import { driftBetween } from "~/rf/observed-drift";
import { momentsOf, toleranceFactor } from "~/rf/production-outlook";
import { expectFigures, expectPublished, figuresOf, type RowCheck } from "./row";

interface Sample {
  readonly n: number;
  readonly p: number;
  readonly gamma: number;
}

export const TOLERANCE_CHECKS: readonly RowCheck[] = [
  {
    ids: /^(k1-\d|nist-exact$)/,
    check: (row) => {
      const { n, p, gamma } = row.inputs as Sample;
      const factor = toleranceFactor(n, p, gamma);
      expectFigures([factor], figuresOf(row.value), 1e-8);
      expectPublished([factor], row);
    },
  },
  {
    ids: /^k1-example$/,
    check: ({ inputs, value }) => {
      const { x } = inputs as { x: readonly number[] };
      const { mean, deviation } = momentsOf(x);
      // An upper limit of a loss is a lower one of its margin.
      const upper = mean + toleranceFactor(x.length, 0.95, 0.95) * deviation;
      expectFigures([mean, deviation, upper], figuresOf(value), 1e-9);
    },
  },
  {
    ids: /^tcf-from-two$/,
    check: (row) => {
      const { f1, T1, f2, T2 } = row.inputs as { f1: number; T1: number; f2: number; T2: number };
      const drift = driftBetween({ celsius: T1, centre: f1 }, { celsius: T2, centre: f2 });
      expectFigures([drift], figuresOf(row.value), Number(row.tolerance));
    },
  },
];
