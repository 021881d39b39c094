// The temperature outlook: which place a temperature speaks for, the worst there, and the drift of measured centres.
import { expect, test } from "vitest";
import type { Cell, Measurement, Requirement } from "~/rf/contract";
import { moved } from "~/rf/drift";
import { evaluateLot } from "~/rf/lot";
import { driftBetween, observedDrift, passbandCentre } from "~/rf/observed-drift";
import { prepare } from "~/rf/prepare";
import { placeOf, placesOf, temperatureOutlook } from "~/rf/temperature-outlook";
import { item, sweepOf } from "./sweep-of";

const FRAME = { range: [-30, 70], ambient: 25 } as const;
const passband: Requirement = { id: "loss", kind: "insertion-loss", band: [0.99e9, 1.01e9], max: 2 };

/** A resonator's response about 1 GHz, in dB: 1 dB at the centre, 3 dB more at ± 20 MHz. */
const resonance = (centre = 1e9) => {
  const frequency = Array.from({ length: 2001 }, (_, k) => 0.9e9 + k * 0.1e6);
  return sweepOf({
    frequency,
    loss: frequency.map((hz) => 1 + 10 * Math.log10(1 + ((hz - centre) / 20e6) ** 2)),
  });
};
const at = (unit: string, temperature: number, network = resonance()): Measurement => ({
  unit,
  temperature,
  sweeps: [{ id: `${unit} ${temperature}`, network }],
});

test("temperatures speak for ambient within 5 °C and for an end up to 3 °C beyond it and 2 °C inside, else for themselves", () => {
  const places = [-33.1, -33, -28, -27.9, 19.9, 20, 30, 30.1, 67.9, 68, 73, 73.1].map((celsius) =>
    placeOf(celsius, FRAME),
  );
  expect(places.map(({ name }) => name)).toEqual([
    "other",
    "low",
    "low",
    "other",
    "other",
    "ambient",
    "ambient",
    "other",
    "other",
    "high",
    "high",
    "other",
  ]);
  expect(placeOf(22, { range: [20, 70], ambient: 25 })).toEqual({ name: "low", celsius: 20 });
  expect(placeOf(23, { range: [20, 70], ambient: 25 })).toEqual({ name: "ambient", celsius: 25 });
  expect(placeOf(70, { ambient: 25 })).toEqual({ name: "other", celsius: 70 });
  expect(placesOf([24, 26, 50, -31], FRAME).map(({ celsius }) => celsius)).toEqual([-30, 25, 50, 70]);
});

test("at each place the worst measured cell and the worst predicted one stand apart", () => {
  const rows = evaluateLot(
    [at("A", 25), at("B", 24, resonance(1.004e9)), at("A", 71, resonance(0.997e9))],
    [passband],
    { ...FRAME, ppmPerKelvin: 20, driftEither: true },
  );
  const { cells } = item(rows);
  const outlook = temperatureOutlook(cells, placesOf([], FRAME), FRAME);
  const named = outlook.map(({ place, measured, predicted }) => [place.celsius, measured?.unit, predicted?.unit]);
  // A is measured at the high end, so that only B is predicted there.
  expect(named).toEqual([
    [-30, undefined, "B"],
    [25, "B", undefined],
    [70, "A", "B"],
  ]);
  const worst = (cell: Cell | undefined) => cell?.result.margin ?? NaN;
  // B moved up by 20 ppm/K over the 46 K from its 24 °C is worse than A. By hand: what stood at 0.99 GHz/(1 + 920e-6) is at the edge now.
  const lossAt = (hz: number) => 1 + 10 * Math.log10(1 + ((hz - 1.004e9) / 20e6) ** 2);
  expect(worst(outlook[2]?.predicted)).toBeCloseTo(2 - lossAt(0.99e9 / (1 + 920e-6)), 4);
});

test("the centre is the mean of the 3 dB crossings, whatever passband the peak is searched in", () => {
  expect(passbandCentre(at("A", 25), { within: [0.99e9, 1.01e9] })).toBeCloseTo(1e9, -2);
  expect(passbandCentre(at("A", 25, resonance(1.0123e9)), { within: [0.98e9, 1.02e9] })).toBeCloseTo(1.0123e9, -2);
  // A side that never falls by 3 dB within the sweep.
  expect(passbandCentre(at("A", 25, resonance(0.905e9)), { within: [0.9e9, 0.92e9] })).toBeNaN();
  expect(passbandCentre(at("A", 25), { within: [3e9, 4e9] })).toBeNaN();
});

test("a sweep moved as the outlook predicts shows the drift it was moved by", () => {
  // f′ = f(1 + drift · 10⁻⁶ (T − T₀)); the centres are read, the drift is found again.
  const base = prepare(resonance());
  const centreAt = (celsius: number, ppm: number) => {
    const prepared = moved(base, 1 + ppm * 1e-6 * (celsius - 25));
    const measurement: Measurement = { unit: "A", temperature: celsius, sweeps: [{ id: "a", network: prepared }] };
    return { celsius, centre: passbandCentre(measurement, { within: [0.99e9, 1.01e9] }) };
  };
  for (const ppm of [-36, -4, 1.5, 28]) {
    const drift = observedDrift(centreAt(-30, ppm), centreAt(25, ppm), centreAt(70, ppm));
    for (const found of Object.values(drift)) expect(found).toBeCloseTo(ppm, 6);
  }
  // Different below and above ambient.
  const bent = observedDrift(centreAt(-30, 10), centreAt(25, 0), centreAt(70, -10));
  expect([bent.below, bent.above]).toEqual([expect.closeTo(10, 6), expect.closeTo(-10, 6)]);
  // By hand: the centres stand 550 ppm under and 450 ppm under ambient's; 100 ppm over 100 K.
  expect(bent.whole).toBeCloseTo(1, 6);
});

test("drift from one temperature alone is no figure", () => {
  const here = { celsius: 25, centre: 1e9 };
  expect(driftBetween(here, here)).toBeNaN();
  expect(driftBetween(here, { celsius: 70, centre: NaN })).toBeNaN();
});

test("a fine and a coarse sweep of one unit give the centre of the fine one, so that no change of sweep is read as drift", () => {
  // Between coarse samples the skirts are straight lines: the coarse centre lies off by parts of its 13 MHz step.
  const every = (hz: number, centre: number) => {
    const points = Math.floor(0.2e9 / hz) + 1;
    const frequency = Array.from({ length: points }, (_, k) => 0.9e9 + k * hz);
    const loss = frequency.map((f) => 1 + 10 * Math.log10(1 + ((f - centre) / 20e6) ** 2));
    return sweepOf({ frequency, loss });
  };
  const options = { within: [0.99e9, 1.01e9] } as const;
  const measured = (celsius: number, centre: number): Measurement => ({
    unit: "A",
    temperature: celsius,
    sweeps: [
      { id: "wide", network: every(13e6, centre) },
      { id: "fine", network: every(0.1e6, centre) },
    ],
  });
  // −5 ppm/K about 25 °C.
  const centreAt = (celsius: number) => {
    const centre = passbandCentre(measured(celsius, 1e9 * (1 - 5e-6 * (celsius - 25))), options);
    return { celsius, centre };
  };
  for (const figure of Object.values(observedDrift(centreAt(-30), centreAt(25), centreAt(70))))
    expect(figure).toBeCloseTo(-5, 1);
  // The sweeps differ: taken for one another between temperatures they would show 1.7 ppm/K that are not there.
  const [coarse, fine] = measured(25, 1e9).sweeps.map((sweep) =>
    passbandCentre({ unit: "A", temperature: 25, sweeps: [sweep] }, options),
  );
  expect(Math.abs((coarse ?? NaN) - (fine ?? NaN))).toBeGreaterThan(10e3);
});
