// What would settle a verdict that is not a pass: a reading, a noise floor or a directivity, in words.
import { formatLevel } from "./describe.ts";
import { lossOf, magnitudeOf, type ReflectionTerms, type TransmissionTerms } from "./uncertainty.ts";

export interface Advice {
  readonly text: string;
  /** True where no reading at all can pass with this setup. */
  readonly isBlocked: boolean;
}

/**
 * For a loss that must reach a limit (rejection, reverse isolation). Where the noise floor alone exceeds the limit no
 * reading can pass, and that is said.
 *
 * @param limit dB @param loss the reading that decides, dB
 */
export function adviseLeastLoss(limit: number, loss: number, terms: TransmissionTerms): Advice {
  const room = magnitudeOf(limit) - terms.floor;
  const floorNeeded = lossOf(magnitudeOf(limit) - magnitudeOf(loss) * terms.factor);
  const floor = Number.isFinite(floorNeeded) ? `a noise floor of ${formatLevel(floorNeeded)} or better` : undefined;
  if (room <= 0) {
    const blocked = `With a noise floor at ${formatLevel(lossOf(terms.floor))} no reading can pass ${formatLevel(limit)}`;
    const both = `a lower floor and a reading above ${formatLevel(lossOf(magnitudeOf(limit) / terms.factor))}`;
    return { text: `${blocked}: it takes ${floor ?? both}.`, isBlocked: true };
  }
  const reading = `a reading of ${formatLevel(lossOf(room / terms.factor))} or more`;
  return settledBy(reading, terms.floor === 0 ? undefined : floor);
}

/** For a loss that must stay below a limit (insertion loss). */
export function adviseLargestLoss(limit: number, terms: TransmissionTerms): Advice {
  const reading = lossOf((magnitudeOf(limit) + terms.floor) * terms.factor);
  return settledBy(`a reading of ${formatLevel(reading)} or less`);
}

/**
 * For a return loss: the reading that passes solves D + (1 + T)|Γ| + M|Γ|² + K|S21||S12| = limit; the directivity that
 * passes is what the same equation leaves at the reading in hand.
 */
export function adviseReturnLoss(limit: number, returnLoss: number, through: number, terms: ReflectionTerms): Advice {
  const { directivity, tracking, sourceMatch, loadMatch } = terms;
  const limitMagnitude = magnitudeOf(limit);
  const room = limitMagnitude - directivity - loadMatch * through;
  const magnitude = magnitudeOf(returnLoss);
  const others = magnitude * (1 + tracking) + sourceMatch * magnitude * magnitude + loadMatch * through;
  const directivityNeeded = lossOf(limitMagnitude - others);
  const better = Number.isFinite(directivityNeeded)
    ? `a directivity of ${formatLevel(directivityNeeded)} or better`
    : undefined;
  if (room <= 0) {
    const blocked = `With this directivity and load match no reading can pass ${formatLevel(limit)}`;
    return { text: better === undefined ? `${blocked}.` : `${blocked}: it takes ${better}.`, isBlocked: true };
  }
  const slope = 1 + tracking;
  const root = (2 * room) / (slope + Math.sqrt(slope * slope + 4 * sourceMatch * room));
  const reading = `a reading of ${formatLevel(lossOf(root))} or more`;
  return settledBy(reading, better);
}

/** For a difference, a delay or a phase: how much the margin lacks. */
export function adviseMargin(shortfall: string): Advice {
  return { text: `It takes ${shortfall} more margin, or that much less uncertainty, to settle it.`, isBlocked: false };
}

function settledBy(reading: string, other?: string): Advice {
  const means = other === undefined ? reading : `${reading}, or ${other},`;
  return { text: `It takes ${means} to settle it.`, isBlocked: false };
}
