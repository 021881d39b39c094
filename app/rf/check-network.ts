// What measured data do not show, or make doubtful, each with its place; nothing is subtracted or repaired by guess.

import { checkColumns } from "./check-columns.ts";
import { checkFlatOffset } from "./check-offset.ts";
import { checkPorts } from "./check-ports.ts";
import { checkSampling } from "./check-sampling.ts";
import { checkWaves } from "./check-waves.ts";
import type { Note, Requirement, Setup, TwoPort } from "./contract.ts";

export interface CheckContext {
  readonly requirements?: readonly Requirement[];
  /** Ohm, of the specification. */
  readonly impedance?: readonly [number, number];
  readonly setup?: Setup;
  /** Hz: where a band that starts at exactly 0 Hz is taken to start. */
  readonly lowestTestFrequency?: number;
  /** The part the data are said to be of. */
  readonly partNumber?: string;
}

/** "Part no.: ABC-123", "P/N ABC-123", "DUT = ABC-123": a label, then the first word after it. */
const PART_LABEL = /(?:\bpart(?:\s*(?:no\.?|number|#))?|\bp\/n|\bdut)\s*[:=#]\s*(\S+)|\bp\/n\s+(\S+)/i;

/**
 * Notes on data quality: passivity, reciprocity, columns not measured, sampling against the requirements, floor, phase
 * steps, a flat offset, swapped ports, reference impedance and comments that name another part. All are doubts; none changes
 * a number.
 *
 * @throws RangeError for a malformed requirement, setup or impedance
 */
export function checkNetwork(network: TwoPort, context: CheckContext = {}): Note[] {
  return [
    ...checkReferences(network, context.impedance),
    ...checkColumns(network),
    ...checkWaves(network, context.setup),
    ...checkSampling(network, context.requirements),
    ...checkFlatOffset(network, context.requirements ?? [], context.impedance),
    ...checkPorts(network, context.requirements ?? [], context),
    ...checkComments(network.comments, context.partNumber),
  ];
}

function checkReferences({ referenceImpedance }: TwoPort, impedance: CheckContext["impedance"]): Note[] {
  if (!impedance || impedance.every((ohm, port) => ohm === referenceImpedance[port])) return [];
  const message = `The file's references are ${inOhm(referenceImpedance)}, the specification's ${inOhm(impedance)}: the data are renormalised.`;
  return [{ code: "reference-impedance", severity: "doubtful", message }];
}

const inOhm = ([first, second]: readonly [number, number]) =>
  first === second ? `${first} Ω` : `${first} Ω and ${second} Ω`;

function checkComments(comments: readonly string[], partNumber: string | undefined): Note[] {
  const wanted = plain(partNumber ?? "");
  if (wanted === "") return [];
  for (const comment of comments) {
    const match = PART_LABEL.exec(comment);
    const named = match?.[1] ?? match?.[2] ?? "";
    if (!/\d/.test(named) || plain(comment).includes(wanted)) continue;
    const message = `A comment names another part: "${comment.slice(0, 80)}".`;
    return [{ code: "other-part", severity: "doubtful", message }];
  }
  return [];
}

/** Letters and digits only, so that "ab-12 c" and "AB12C" are one. */
const plain = (text: string) => text.toUpperCase().replace(/[^\p{L}\p{N}]/gu, "");
