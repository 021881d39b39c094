// Invented curves for looking at the figures of the curves sheet in cases the demo does not show: limits passed, holes, nulls.
import { delayPanel } from "~/components/curves-delay-panel";
import { SmithFigure } from "~/charts/smith-figure";
import { TwoScaleFigure } from "~/charts/two-scale-figure";
import { ValueFigure } from "~/charts/value-figure";
import { wallsFromRequirements } from "~/charts/walls";
import { many, requirements, worstPoints } from "./invented";

const PASSBAND = [1.92e9, 1.98e9] as const;
const grid = Array.from({ length: 801 }, (_, index) => 1.85e9 + index * 0.25e6);

/** A bathtub with ears at the edges of the passband, s. */
const delay = grid.map((hz) => {
  const place = (hz - 1.95e9) / 33e6;
  return (18 + 8 * place ** 2 + 40 * Math.exp(-((Math.abs(place) - 1.06) ** 2) / 0.006)) * 1e-9;
});

const delayLines = [
  { id: "a", lineNumber: "5.1", kind: "group-delay", band: PASSBAND, max: 40e-9 },
  { id: "b", lineNumber: "5.2", kind: "group-delay-variation", band: [1.93e9, 1.97e9], max: 3.5e-9 },
] as const;

export function DelayScene() {
  const stretches = [
    { sweepId: "a", frequency: grid.slice(0, 420), delay: delay.slice(0, 420) },
    { sweepId: "a", frequency: grid.slice(426), delay: delay.slice(426) },
  ];
  const panel = delayPanel({ stretches, aperture: [5e5, 5e5], uncertainty: null }, delayLines, delayLines[0]);
  return (
    <ValueFigure
      panels={[panel]}
      full={[1.85e9, 2.05e9]}
      initialWindow={[1.905e9, 1.995e9]}
      passbands={[PASSBAND]}
      title="Group delay, invented"
      description="Group delay of an invented filter"
      unit="ns"
      format={(value) => value.toFixed(2)}
      caption="Aperture 0.5 MHz"
      table
    />
  );
}

/** Loops of a coupled-resonator filter: small inside the passband, around the rim outside. */
function reflection(hz: number, size: number): readonly [number, number] {
  const place = (hz - 1.95e9) / 33e6;
  const outside = Math.min(1, (Math.abs(place) / 1.08) ** 14);
  const radius = Math.max(size * Math.abs(Math.sin(place * 4.6 + 0.4)), outside * 0.98);
  const angle = -place * 3.4 + (place > 0 ? -1 : 1) * outside * 1.2;
  return [radius * Math.cos(angle), radius * Math.sin(angle)];
}

export function SmithScene() {
  const port = (number: 1 | 2, size: number) => {
    const points = grid.map((hz) => reflection(hz, size));
    const locus = { id: "a", reference: 50, frequency: grid, re: points.map(([x]) => x), im: points.map(([, y]) => y) };
    const limit = { lineNumber: `4.${number}`, returnLoss: 16, band: PASSBAND };
    return { port: number, loci: [locus], limits: [limit] };
  };
  return (
    <SmithFigure ports={[port(1, 0.13), port(2, 0.21)]} bands={[PASSBAND]} title="Smith chart, invented" caption="" />
  );
}

export function ScalesScene() {
  const walls = wallsFromRequirements(requirements);
  return <TwoScaleFigure walls={walls} traces={many} worstPoints={worstPoints} title="Curves, invented" />;
}
