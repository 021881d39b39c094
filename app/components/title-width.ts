// How wide a page's title will be at its large size, so that the block can tell without script whether it fits its cell.

/** Advance widths of Manrope at weight 650 in hundredths of an em, rounded up to the group; read from the font in a browser. */
const advanceGroups: readonly (readonly [hundredths: number, characters: string])[] = [
  [20, " "],
  [30, "iljI'|.,·"],
  [36, "!:;"],
  [46, '()[]{}"-/\\f1rt*°'],
  [56, "ckxvyszFLJ7?+×–`"],
  [60, "a2358eET4Y"],
  [63, "0698bdghnopquBPV$<>~±−"],
  [67, "AKRSXZ&_^"],
  [75, "CDGHNOQU="],
  [90, "mwM%"],
  [97, "W@#—"],
];

const advance = new Map(
  advanceGroups.flatMap(([hundredths, characters]) =>
    Array.from(characters).map((character) => [character, hundredths]),
  ),
);

/** Of a character outside the table, such as an accented capital. */
const unknownAdvance = 72;

/**
 * Estimated width of a title set at 24 px, weight 650, letter spacing -0.015 em; never under the true width
 * for characters of the table.
 *
 * @returns pixels
 */
export function titleWidthPx(title: string): number {
  const hundredths = Array.from(title).reduce(
    (sum, character) => sum + (advance.get(character) ?? unknownAdvance) - 1.5,
    0,
  );
  return Math.ceil((hundredths * 24) / 100);
}
