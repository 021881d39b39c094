// The circles of the Smith chart in the plane of Γ: constant resistance, constant reactance, constant return loss.

export interface Circle {
  readonly x: number;
  readonly y: number;
  readonly radius: number;
}

/**
 * Γ at constant normalised resistance r: centre r/(1 + r) on the real axis, radius 1/(1 + r)
 * (P. H. Smith, Electronics, January 1939; IEEE Std 145: Smith chart).
 */
export function resistanceCircle(resistance: number): Circle {
  return { x: resistance / (1 + resistance), y: 0, radius: 1 / (1 + resistance) };
}

/** Γ at constant normalised reactance x, not 0: centre (1, 1/x), radius 1/|x|; the part inside the unit circle counts. */
export function reactanceCircle(reactance: number): Circle {
  return { x: 1, y: 1 / reactance, radius: 1 / Math.abs(reactance) };
}

/** Γ of a normalised impedance r + jx: (z - 1)/(z + 1). */
export function reflectionOf(resistance: number, reactance: number): { readonly x: number; readonly y: number } {
  const power = (resistance + 1) ** 2 + reactance ** 2;
  return { x: (resistance ** 2 - 1 + reactance ** 2) / power, y: (2 * reactance) / power };
}

/** |Γ| of a return loss in dB. */
export function radiusOf(returnLoss: number): number {
  return 10 ** (-returnLoss / 20);
}

/** A constant-value curve of the grid and where its value is written. */
export interface GridLine {
  readonly value: number;
  readonly label: string;
  readonly circle: Circle;
}

export interface SmithGrid {
  readonly resistance: readonly GridLine[];
  readonly reactance: readonly GridLine[];
}

const WHOLE = [0.2, 0.5, 1, 2, 5];
const STEPS = [0.5, 0.2, 0.1, 0.05, 0.02, 0.01];

/**
 * Values of the grid for a chart that shows |Γ| up to `reach`: the textbook set for the whole chart; enlarged about the
 * centre, values about r = 1 and x = 0 in a step that gives three or more on either side.
 */
export function smithGrid(reach: number): SmithGrid {
  if (reach >= 0.7) return gridOf(WHOLE, WHOLE, (value) => String(value));
  // About the centre Γ moves by half of what the normalised impedance does.
  const step = STEPS.find((candidate) => (2 * reach) / candidate >= 3) ?? 0.01;
  const count = Math.ceil(((1 + reach) / (1 - reach) - 1) / step);
  const digits = step < 0.1 ? 2 : 1;
  const inSight = reach * (1 - 1e-9);
  const resistance = Array.from({ length: 2 * count + 1 }, (_, index) => 1 + (index - count) * step).filter(
    (value) => value > 0 && Math.abs(reflectionOf(value, 0).x) < inSight,
  );
  const reactance = Array.from({ length: 2 * count }, (_, index) => (index + 1) * step).filter(
    (value) => nearestToMiddle(value) < inSight,
  );
  return gridOf(resistance, reactance, (value) => value.toFixed(digits));
}

/** Least |Γ| at a constant reactance: the distance of its circle from the middle. */
function nearestToMiddle(reactance: number): number {
  const { x, y, radius } = reactanceCircle(reactance);
  return Math.hypot(x, y) - radius;
}

function gridOf(
  resistance: readonly number[],
  reactance: readonly number[],
  label: (value: number) => string,
): SmithGrid {
  return {
    resistance: resistance.map((value) => ({ value, label: label(value), circle: resistanceCircle(value) })),
    reactance: [...reactance, ...reactance.map((value) => -value)].map((value) => ({
      value,
      label: `${value < 0 ? "−" : "+"}j${label(Math.abs(value))}`,
      circle: reactanceCircle(value),
    })),
  };
}

/**
 * Where the arc of a reactance meets the rim at |Γ| = reach, on the side away from the open circuit: there its value is
 * written. From |Γ|² = reach² and the arc's circle: u + v/x = (1 + reach²)/2.
 */
export function reactanceAtRim(reactance: number, reach: number): { readonly x: number; readonly y: number } {
  const half = (1 + reach * reach) / 2;
  const scale = 1 + 1 / (reactance * reactance);
  const root = Math.sqrt(Math.max(0, (half / reactance) ** 2 - scale * (half * half - reach * reach)));
  const y = (half / reactance + Math.sign(reactance) * root) / scale;
  return { x: half - y / reactance, y };
}
