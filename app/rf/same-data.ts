// Finds networks whose data are alike to the bit: the same measurement under two names.

import type { Series, TwoPort } from "./contract.ts";

/** Pairs [i, j], i < j, whose frequencies and S-parameters are the same, bit by bit. Comments and references do not count. */
export function sameData(networks: readonly TwoPort[]): (readonly [number, number])[] {
  const columns = networks.map(columnsOf);
  const byHash = new Map<number, number[]>();
  const pairs: (readonly [number, number])[] = [];
  columns.forEach((words, index) => {
    const hash = hashOf(words);
    const earlier = byHash.get(hash) ?? [];
    for (const other of earlier) if (isSame(columns[other] ?? [], words)) pairs.push([other, index]);
    byHash.set(hash, [...earlier, index]);
  });
  return pairs.sort((one, other) => one[0] - other[0] || one[1] - other[1]);
}

/** Units whose data is that of another unit to the bit, each with the name they all count under: they count as one. */
export function identicalUnits(
  files: readonly { readonly unit: string; readonly network: TwoPort }[],
): Map<string, string> {
  const aliases = new Map<string, string>();
  const counted = (unit: string): string => {
    const other = aliases.get(unit);
    return other === undefined ? unit : counted(other);
  };
  for (const [earlier, later] of sameData(files.map(({ network }) => network))) {
    const original = counted(files[earlier]?.unit ?? "");
    const copy = counted(files[later]?.unit ?? "");
    if (original !== copy) aliases.set(copy, original);
  }
  return new Map([...aliases.keys()].map((unit) => [unit, counted(unit)]));
}

/** The bits of the nine columns as 32-bit words. */
function columnsOf({ frequency, s11, s21, s12, s22 }: TwoPort): Uint32Array[] {
  const bits = ({ buffer, byteOffset, length }: Series) => new Uint32Array(buffer, byteOffset, 2 * length);
  return [frequency, ...[s11, s21, s12, s22].flatMap(({ re, im }) => [re, im])].map(bits);
}

/** FNV-1a over 32-bit words: equal data have equal hashes, and few others do. */
function hashOf(columns: readonly Uint32Array[]): number {
  let hash = 0x811c9dc5;
  for (const words of columns) for (const word of words) hash = Math.imul(hash ^ word, 0x01000193);
  return hash;
}

function isSame(one: readonly Uint32Array[], other: readonly Uint32Array[]): boolean {
  return one.every((words, column) => {
    const others = other[column];
    return words.length === others?.length && words.every((word, k) => word === others[k]);
  });
}
