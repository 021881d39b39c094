// What a Smith chart shows at a frequency, in words and as a table: reflection, impedance, standing-wave ratio.
import { formatFrequency, formatNumber } from "~/components/format";
import type { Band } from "~/rf/index";
import { impedanceOf, standingWaveRatio } from "~/rf/input-impedance";
import { frequencyUnit } from "./frequency-range";
import { reflectionAt, type SmithLocus } from "./smith-plot";

export interface SmithReading {
  /** Hz */
  readonly frequency: number;
  /** |Γ| and its angle in degrees. */
  readonly magnitude: number;
  readonly angle: number;
  /** Ω; NaN where Γ = 1. */
  readonly resistance: number;
  readonly reactance: number;
  /** NaN beyond total reflection. */
  readonly ratio: number;
  readonly x: number;
  readonly y: number;
}

/** The reading on the first locus that reaches a frequency. */
export function smithReading(loci: readonly SmithLocus[], frequency: number): SmithReading | undefined {
  for (const locus of loci) {
    const point = reflectionAt(locus, frequency);
    if (!point) continue;
    const { x, y } = point;
    const magnitude = Math.hypot(x, y);
    const impedance = impedanceOf(x, y, locus.reference);
    return {
      frequency,
      magnitude,
      angle: (Math.atan2(y, x) * 180) / Math.PI,
      resistance: impedance.re,
      reactance: impedance.im,
      ratio: standingWaveRatio(magnitude),
      x,
      y,
    };
  }
  return undefined;
}

/** "1.9500 GHz: Γ 0.123 at 45.1°, Z 56.1 + j10.2 Ω, VSWR 1.28" */
export function smithWords({ frequency, magnitude, angle, ...reading }: SmithReading): string {
  const parts = [
    `Γ ${formatNumber(magnitude, 3)} at ${formatNumber(angle, 1)}°`,
    `Z ${impedanceWords(reading)}`,
    `VSWR ${ratioWords(reading.ratio)}`,
  ];
  return `${formatFrequency(frequency)}: ${parts.join(", ")}`;
}

function impedanceWords({ resistance, reactance }: Pick<SmithReading, "resistance" | "reactance">): string {
  if (Number.isNaN(resistance)) return "none, an open circuit";
  const sign = reactance < 0 ? "−" : "+";
  return `${formatNumber(resistance, 1)} ${sign} j${formatNumber(Math.abs(reactance), 1)} Ω`;
}

const ratioWords = (ratio: number): string => (Number.isNaN(ratio) ? "none" : formatNumber(ratio, 2));

/** Rows at most, all of them samples. */
const MOST_ROWS = 101;

/** The samples of a band, every n-th where they are many; of all the sweep where there is no band. */
export function smithTable(loci: readonly SmithLocus[], bands: readonly Band[]) {
  const isShown = (hz: number) => bands.length === 0 || bands.some(([from, to]) => hz >= from && hz <= to);
  const samples = [...new Set(loci.flatMap(({ frequency }) => frequency.filter(isShown)))].sort((a, b) => a - b);
  const every = Math.ceil(samples.length / MOST_ROWS);
  const unit = frequencyUnit([samples[0] ?? 0, samples.at(-1) ?? 0]);
  return {
    heads: [`Frequency, ${unit.name}`, "|Γ|", "Angle, °", "R, Ω", "X, Ω", "VSWR"],
    rows: samples
      .filter((_, index) => index % every === 0)
      .flatMap((hz) => {
        const reading = smithReading(loci, hz);
        if (!reading) return [];
        const { magnitude, angle, resistance, reactance, ratio } = reading;
        return [
          [
            formatNumber(hz / unit.hertz, unit.name === "GHz" ? 4 : 3),
            formatNumber(magnitude, 4),
            formatNumber(angle, 1),
            formatNumber(resistance, 2),
            formatNumber(reactance, 2),
            Number.isNaN(ratio) ? "–" : formatNumber(ratio, 3),
          ],
        ];
      }),
  };
}
