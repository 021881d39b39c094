// Ports perhaps swapped: requirements that the data meet only with port 1 and port 2 exchanged.

import type { Note, Requirement, Setup, TwoPort, Verdict } from "./contract.ts";
import { evaluate } from "./evaluate.ts";
import { complies } from "./verdict.ts";

export interface PortContext {
  /** Ohm, of the specification. */
  readonly impedance?: readonly [number, number];
  readonly setup?: Setup;
  /** Hz: where a band that starts at exactly 0 Hz is taken to start. */
  readonly lowestTestFrequency?: number;
}

const FORWARD: readonly Requirement["kind"][] = ["insertion-loss", "rejection"];

/**
 * One note where some of the lines that tell the ports apart do not hold as the file stands, and all of them hold with its
 * ports exchanged (S11 with S22, S21 with S12, and the references), under simple acceptance. Lines tell the ports apart where
 * return loss is asked of both, or reverse isolation beside a forward line: a part that is only too poor fails both ways.
 * A line that the sweep covers neither way says nothing: a sweep over the passband alone is judged by what it reaches.
 *
 * @throws RangeError for a malformed requirement, setup or impedance
 */
export function checkPorts(network: TwoPort, requirements: readonly Requirement[], context: PortContext = {}): Note[] {
  const lines = telling(requirements);
  if (lines.length === 0) return [];
  const asRead = evaluate(network, lines, context);
  const failed = lines.filter((_, at) => isFailed(asRead[at]?.verdict));
  if (failed.length === 0) return [];
  const exchanged = evaluate(withPortsExchanged(network), lines, context);
  const reached = exchanged.filter(({ verdict }, at) => isReached(verdict) || isReached(asRead[at]?.verdict));
  if (!reached.every(({ verdict }) => complies(verdict, "simple"))) return [];
  const limits = [...new Set(failed.map(wordsOf))];
  const all = reached.length === lines.length ? "all limits" : "all limits within the sweep";
  const message = `The ports may be swapped: ${limits.join(" and ")} ${limits.length > 1 ? "do" : "does"} not hold, and ${all} that tell the ports apart hold with port 1 and port 2 exchanged.`;
  return [{ code: "ports-swapped", severity: "doubtful", message }];
}

const isFailed = (verdict: Verdict | undefined): boolean => verdict === "fail" || verdict === "conditional-fail";
const isReached = (verdict: Verdict | undefined): boolean => verdict !== "not-covered";

/** The lines that an exchange of the ports can change, if they ask both ports something. */
function telling(requirements: readonly Requirement[]): Requirement[] {
  const reflections = requirements.filter(({ kind }) => kind === "return-loss");
  const ports = new Set(reflections.map((line) => "port" in line && line.port));
  const reverse = requirements.filter(({ kind }) => kind === "reverse-isolation");
  const forward = requirements.filter(({ kind }) => FORWARD.includes(kind));
  return [
    ...(ports.size === 2 ? reflections : []),
    ...(reverse.length > 0 && forward.length > 0 ? [...forward, ...reverse] : []),
  ];
}

function wordsOf(line: Requirement): string {
  if (line.kind === "return-loss") return `the return loss of port ${line.port}`;
  return line.kind === "reverse-isolation" ? "the reverse isolation" : `the ${line.kind.replace("-", " ")}`;
}

/** The same two-port seen from the other side. */
export function withPortsExchanged(network: TwoPort): TwoPort {
  const { s11, s21, s12, s22, referenceImpedance } = network;
  const [first, second] = referenceImpedance;
  return { ...network, s11: s22, s21: s12, s12: s21, s22: s11, referenceImpedance: [second, first] };
}
