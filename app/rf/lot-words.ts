// Lists in sentences about a lot: units, temperatures.
import { formatQuantity } from "./quantity.ts";

/** "A", "A and B", "A, B and C" */
export const listed = (words: readonly string[]): string =>
  words.length < 2 ? words.join("") : `${words.slice(0, -1).join(", ")} and ${words.at(-1) ?? ""}`;

/** "−30, +25 and +70 °C" */
export function celsiusList(temperatures: readonly number[]): string {
  const figures = temperatures.map((celsius) => {
    const words = formatQuantity(celsius, "temperature").replace(" °C", "");
    return celsius > 0 ? `+${words}` : words;
  });
  return `${listed(figures)} °C`;
}
