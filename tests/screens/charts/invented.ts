// Invented requirements and curves for looking at the charts: a band-pass at 1.95 GHz, computed, of no real part.
import type { NumberedRequirement, TraceSeries, WorstPoint } from "~/charts/types";

export const requirements: readonly NumberedRequirement[] = [
  { id: "a", lineNumber: "2.1", kind: "insertion-loss", band: [1.92e9, 1.98e9], max: 0.95 },
  { id: "b", lineNumber: "2.2", kind: "ripple", band: [1.92e9, 1.98e9], max: 0.6 },
  { id: "c", lineNumber: "3.1", kind: "rejection", band: [1.76e9, 1.87e9], min: 55 },
  {
    id: "d",
    lineNumber: "3.2",
    kind: "rejection",
    band: [1.87e9, 1.895e9],
    min: {
      points: [
        [1.87e9, 55],
        [1.895e9, 30],
      ],
      scale: "linear",
    },
  },
  { id: "e", lineNumber: "3.3", kind: "rejection", band: [2.005e9, 2.04e9], min: 34.5 },
  { id: "f", lineNumber: "3.4", kind: "rejection", band: [2.04e9, 2.14e9], min: 55 },
  { id: "g", lineNumber: "4.1", kind: "return-loss", port: 1, band: [1.92e9, 1.98e9], min: 16 },
  { id: "h", lineNumber: "4.2", kind: "return-loss", port: 2, band: [1.92e9, 1.98e9], min: 16 },
];

/** Chebyshev polynomial of the first kind. */
const chebyshev = (order: number, x: number) =>
  Math.abs(x) <= 1 ? Math.cos(order * Math.acos(x)) : Math.cosh(order * Math.acosh(Math.abs(x)));

interface Shape {
  readonly centre: number;
  readonly width: number;
  readonly loss: number;
  readonly returnLoss: number;
}

function responses({ centre, width, loss, returnLoss }: Shape, frequency: number) {
  const mapped = (frequency / centre - centre / frequency) * (centre / width);
  const ripple = 1 / (10 ** (returnLoss / 10) - 1);
  const power = ripple * chebyshev(6, mapped) ** 2;
  const dissipation = loss * (1 + 0.75 * Math.min(Math.abs(mapped), 1.15) ** 8);
  const transmission = 10 * Math.log10(1 + power) + dissipation;
  const match = 10 * Math.log10((1 + power) / (power + 2e-4)) + 0.1;
  return { transmission, match };
}

export function curve(
  id: string,
  label: string,
  parameter: TraceSeries["parameter"],
  emphasis: TraceSeries["emphasis"],
  shape: Shape,
): TraceSeries {
  const frequency = Array.from({ length: 1521 }, (_, index) => 1.76e9 + index * 0.25e6);
  const level = frequency.map((hz) => responses(shape, hz)[parameter === "s21" ? "transmission" : "match"]);
  return { id, label, parameter, emphasis, frequency, level };
}

const reported = { centre: 1.9488e9, width: 63e6, loss: 0.66, returnLoss: 18 };

export const single: readonly TraceSeries[] = [
  curve("s21", "S21", "s21", "worst", reported),
  curve("s11", "S11", "s11", "worst", reported),
  curve("s22", "S22", "s22", "worst", { ...reported, centre: 1.9492e9, returnLoss: 17.2 }),
];

export const many: readonly TraceSeries[] = [
  ...Array.from({ length: 14 }, (_, index) => {
    const shape = {
      centre: 1.9495e9 + ((index * 5) % 14) * 0.12e6,
      width: 63.5e6 + ((index * 3) % 14) * 0.1e6,
      loss: 0.48 + ((index * 7) % 14) * 0.012,
      returnLoss: 17.5 + (index % 7) * 0.5,
    };
    return [
      curve(`o21-${index}`, `unit ${index}`, "s21", "other", shape),
      curve(`o11-${index}`, `unit ${index}`, "s11", "other", shape),
    ];
  }).flat(),
  curve("w21", "unit 0420, 70 °C", "s21", "worst", reported),
  curve("w11", "S11", "s11", "worst", reported),
];

function level(trace: TraceSeries | undefined, frequency: number): number {
  return trace?.level[trace.frequency.indexOf(frequency)] ?? Number.NaN;
}

const lossAtEdge = level(single[0], 1.98e9);

export const worstPoints: readonly WorstPoint[] = [
  {
    lineNumber: "2.1",
    verdict: "fail",
    frequency: 1.98e9,
    value: lossAtEdge,
    margin: 0.95 - lossAtEdge,
    interval: [lossAtEdge - 0.05, lossAtEdge + 0.05],
    unit: "dB",
    panel: "transmission",
    limit: 0.95,
    limitText: "max 0.95 dB",
    label: "unit 0420, 70 °C",
  },
  {
    lineNumber: "2.2",
    verdict: "conditional-pass",
    frequency: 1.98e9,
    value: 0.54,
    margin: 0.06,
    interval: [0.47, 0.61],
    unit: "dB",
    limit: 0.6,
    limitText: "max 0.60 dB",
    label: "unit 0420, 70 °C",
  },
  {
    lineNumber: "4.1",
    verdict: "pass",
    frequency: 1.9385e9,
    value: level(single[1], 1.9385e9),
    margin: level(single[1], 1.9385e9) - 16,
    unit: "dB",
    panel: "match",
    limit: 16,
    limitText: "min 16 dB",
  },
];
