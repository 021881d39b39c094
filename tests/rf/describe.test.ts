// The words of a reason stay readable, and short enough to be stored, however many holes a sweep has.
import { expect, test } from "vitest";
import type { Band } from "~/rf/contract";
import { describeMissing } from "~/rf/describe";

const holes = (count: number): Band[] =>
  Array.from({ length: count }, (_, k): Band => [1e9 + k * 1e6, 1e9 + k * 1e6 + 4e5]);

test("twenty missing stretches are all named, of thousands the first twenty and how many more there are", () => {
  expect(describeMissing(holes(20))).not.toContain("more");
  const words = describeMissing(holes(5_000));
  expect(words).toContain("and 4980 more stretches.");
  expect(words.length).toBeLessThan(1_000); // MariaDB's TEXT ends at 65,535 bytes
});
