// Check values, section 5: uncertainty of a return loss, a floor under a reading, and the four outcomes.
import { expect } from "vitest";
import { evaluate } from "~/rf/evaluate";
import { reflectionEnds, reflectionSpread, reflectionTerms, transmissionEnds } from "~/rf/uncertainty";
import { complies } from "~/rf/verdict";
import { item, sweepOf } from "../sweep-of";
import { expectFigures, type RowCheck } from "./row";

const CLOSED_FORM = 1e-9;

interface ReflectionRow {
  readonly rl_db: number;
  readonly D_db: number;
  readonly T_lin: number;
  readonly M_db: number;
  readonly R_lin: number;
}
interface ReflectionFigures {
  readonly gamma: number;
  readonly U_worst_case_lin: number;
  readonly rl_low_db: number;
  readonly rl_high_db: number;
  readonly U_rl_db_upper: number;
  readonly U_rl_db_lower: number;
}
interface Bound {
  readonly D_db: number;
  readonly rl_db: number;
  readonly low_db: number;
  readonly high_db: number | "inf";
}
interface Outcome {
  readonly simple_acceptance: "pass" | "fail";
  readonly guarded_binary: "pass" | "fail";
  readonly four_outcome: string;
}

export const UNCERTAINTY_CHECKS: readonly RowCheck[] = [
  {
    ids: /^uvrc-/,
    check: ({ inputs, value }) => {
      const { rl_db, D_db, T_lin, M_db, R_lin } = inputs as ReflectionRow;
      const wanted = value as ReflectionFigures;
      // The guide's term R, the receiver's linearity and repeatability, has no counterpart here: it enters with D.
      const directivity = 10 ** (-D_db / 20) + R_lin;
      const terms = { ...reflectionTerms({ sourceMatch: M_db }), directivity, tracking: T_lin };
      const [low, high] = reflectionEnds(rl_db, 0, terms);
      expectFigures(
        [reflectionSpread(wanted.gamma, 0, terms), low, high, high - rl_db, low - rl_db],
        [wanted.U_worst_case_lin, wanted.rl_low_db, wanted.rl_high_db, wanted.U_rl_db_upper, wanted.U_rl_db_lower],
        CLOSED_FORM,
      );
    },
  },
  {
    ids: /^rl-bounds$/,
    check: ({ value }) => {
      const bounds = value as readonly Bound[];
      expect(bounds.length).toBeGreaterThan(20);
      for (const { D_db, rl_db, low_db, high_db } of bounds) {
        const [low, high] = reflectionEnds(rl_db, 0, reflectionTerms({ directivity: D_db }));
        expectFigures([low], [low_db], CLOSED_FORM);
        if (high_db !== "inf") expectFigures([high], [high_db], CLOSED_FORM);
        else expect(high > 200).toBe(true); // at |Γ| = D the difference is zero but for its last digit
      }
    },
  },
  {
    ids: /^iso-/,
    check: ({ inputs, value }) => {
      const { reading_db, leak_db } = inputs as { reading_db: number; leak_db: number };
      const { ratio, plus_db, minus_db } = value as { ratio: number; plus_db: number; minus_db: number };
      const floor = 10 ** (leak_db / 20);
      const [low, high] = transmissionEnds(reading_db, { factor: 1, floor });
      expectFigures([reading_db - low, reading_db - high], [plus_db, minus_db], CLOSED_FORM);
      expectFigures([floor / 10 ** (-reading_db / 20)], [ratio], CLOSED_FORM);
    },
  },
  {
    ids: /^ilac-/,
    check: ({ inputs, value }) => {
      const { margin, U } = inputs as { margin: number; U: number };
      const wanted = value as Outcome;
      const reading = 10 - margin;
      const network = sweepOf({ frequency: [1e9, 2e9], loss: [reading, reading] });
      const line = { id: "1", kind: "insertion-loss", band: [1e9, 2e9], max: 10 } as const;
      const result = item(evaluate(network, [line], { setup: { transmission: U } }));
      expectFigures([result.margin, ...result.marginInterval], [margin, margin - U, margin + U], CLOSED_FORM);
      expect(result.verdict).toBe(wanted.four_outcome.replace(" ", "-"));
      expect(complies(result.verdict, "simple")).toBe(wanted.simple_acceptance === "pass");
      expect(complies(result.verdict, "guarded")).toBe(wanted.guarded_binary === "pass");
    },
  },
];
