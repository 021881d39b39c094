// What is stated of a measurement, in words: the figures of a setup, the instrument, the drift.
import { SETUP_FIELDS, setupText, type SetupField } from "~/forms/setup";
import { driftText } from "~/forms/stated-drift";
import type { Setup } from "~/rf/contract";
import { formatQuantity } from "~/rf/quantity";
import type { Instrument, StatedDrift } from "~/rf/stated-measurement";

/** Label and figure of what a setup states; what it leaves out is not in the list. */
export function setupFacts(setup: Setup): [label: string, figure: string][] {
  return SETUP_FIELDS.flatMap((field) => {
    const value = setup[field.field];
    if (value === undefined) return [];
    const kind = field.field === "noiseFloor" ? `, ${setup.noiseFloorKind ?? "peak"}` : "";
    return [[field.label, `${setupText(field, value)}${kind}`] as [string, string]];
  });
}

/** "directivity 40 dB; noise floor below a through 110 dB, peak" */
export const setupWords = (setup: Setup): string =>
  setupFacts(setup)
    .map(([label, figure]) => `${label.charAt(0).toLowerCase()}${label.slice(1).split(",")[0] ?? ""} ${figure}`)
    .join("; ");

/** Every figure of a setup as stated, and where it is not, what is assumed: "not stated, assumed 0.1 dB". */
export function setupInUseFacts(setup: Setup, assumed: Setup): [label: string, words: string][] {
  const stated = new Map(setupFacts(setup));
  const taken = new Map(setupFacts(assumed));
  return SETUP_FIELDS.map(({ label }) => {
    const figure = taken.get(label);
    return [label, stated.get(label) ?? (figure === undefined ? "not stated" : `not stated, assumed ${figure}`)];
  });
}

/** What stands in a field that is left blank: "assumed 0.1 dB". @param quote of a sweep's setup: what the quote states goes before */
export function blankWords(field: SetupField, assumed: Setup, quote: Setup = {}): string {
  const stated = quote[field.field];
  if (stated !== undefined) return `${setupText(field, stated)} of the quote`;
  const value = assumed[field.field];
  return value === undefined ? "nothing assumed" : `assumed ${setupText(field, value)}`;
}

/** Analyser, calibration and drift of a quote; "not stated" where nothing was said. */
export function statedFacts(instrument: Instrument, drift: StatedDrift | null): [label: string, words: string][] {
  const { analyser, calibration, calibratedOn } = instrument;
  return [
    ["Analyser", analyser ?? "not stated"],
    ["Calibration", calibration ?? "not stated"],
    ["Calibrated on", calibratedOn ?? "not stated"],
    ["Temperature drift", drift === null ? "not stated" : driftWords(drift)],
  ];
}

function driftWords(drift: StatedDrift): string {
  const { lossPerKelvin } = drift;
  const loss = lossPerKelvin === undefined ? "" : `; resistance ${formatQuantity(lossPerKelvin, "plain")} a kelvin`;
  return `${driftText(drift)}${loss}`;
}
