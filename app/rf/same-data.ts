// Finds networks whose data are alike to the bit: the same measurement under two names.

import type { Series, TwoPort } from "./contract.ts";

/** Pairs [i, j], i < j, whose frequencies and S-parameters are the same, bit by bit. Comments and references do not count. */
export function sameData(networks: readonly TwoPort[]): (readonly [number, number])[] {
  const pairs = sameDataGroups(networks).flatMap((group) =>
    group.flatMap((one, place) => group.slice(place + 1).map((other) => [one, other] as const)),
  );
  return pairs.sort((one, other) => one[0] - other[0] || one[1] - other[1]);
}

/**
 * Indices of networks whose data are the same, two or more to a group, ascending in each and by their first. Each network is
 * compared with one of a group only: two hundred copies cost no more than two hundred files that differ.
 */
export function sameDataGroups(networks: readonly TwoPort[]): number[][] {
  const columns = networks.map(columnsOf);
  const byHash = new Map<number, number[][]>();
  columns.forEach((words, index) => {
    const hash = hashOf(words);
    const groups = byHash.get(hash) ?? [];
    const own = groups.find(([first = 0]) => isSame(columns[first] ?? [], words));
    if (own === undefined) groups.push([index]);
    else own.push(index);
    byHash.set(hash, groups);
  });
  const groups = [...byHash.values()].flat().filter(({ length }) => length > 1);
  return groups.sort(([one = 0], [other = 0]) => one - other);
}

/** Units whose data is that of another unit to the bit, each with the name they all count under: they count as one. */
export function identicalUnits(
  files: readonly { readonly unit: string; readonly network: TwoPort }[],
): Map<string, string> {
  const groups = sameDataGroups(files.map(({ network }) => network));
  return unitsCountedAs(groups.map((group) => group.map((index) => files[index]?.unit ?? "")));
}

/** From lists of units that are one another, each unit but the first of its kind with the name it counts under. */
export function unitsCountedAs(groups: readonly (readonly string[])[]): Map<string, string> {
  const aliases = new Map<string, string>();
  const counted = (unit: string): string => {
    const other = aliases.get(unit);
    return other === undefined ? unit : counted(other);
  };
  for (const [first = "", ...others] of groups)
    for (const other of others) {
      const [original, copy] = [counted(first), counted(other)];
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
