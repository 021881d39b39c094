// The demo's specifications: a receive filter, released, typed as an engineer types it, and a transmit filter still a draft.
import type { Person } from "~/services/person.server";
import { createSpecification, readSpecification } from "~/services/specifications.server";
import { releaseRevision } from "~/services/specification-release.server";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { filledForm, made } from "./demo-steps";

type Line = Readonly<Record<string, string>>;

const TITLE_BLOCK = { z1: "50", z2: "50", temperatureFrom: "-30", temperatureTo: "70", ambient: "25" };

const passband = { from: "1.92G", to: "1.98G" };

/** The same requirements as `tests/reference/journey/specification.json`, which tells how the demo's data was made. */
export const RECEIVE_LINES: readonly Line[] = [
  { kind: "insertion-loss", ...passband, limit: "1.2 dB" },
  { kind: "ripple", ...passband, limit: "0.8 dB" },
  { kind: "rejection", from: "1.76G", to: "1.87G", limit: "55 dB" },
  { kind: "rejection", from: "1.87G", to: "1.895G", limit: "55 dB", limitEnd: "30 dB" },
  { kind: "rejection", from: "2005 MHz", to: "2040 MHz", limit: "30 dB" },
  { kind: "rejection", from: "2040 MHz", to: "2140 MHz", limit: "50 dB" },
  { kind: "rejection", from: "2.01G", to: "2.03G", limit: "28 dB", relativeFrom: "1.92G", relativeTo: "1.98G" },
  { kind: "reverse-isolation", from: "2.06G", to: "2.14G", limit: "50 dB" },
  { kind: "return-loss", port: "1", ...passband, limit: "15 dB" },
  { kind: "return-loss", port: "2", ...passband, limit: "15 dB" },
  { kind: "declared", name: "Input power, continuous", limit: "min 20 W" },
  { kind: "declared", name: "Connectors", limit: "SMA female, both ports" },
];

const DRAFT_LINES: readonly Line[] = [
  { kind: "insertion-loss", from: "2.11G", to: "2.17G", limit: "1.0 dB" },
  { kind: "bandwidth", least: "64 MHz", level: "3 dB" },
  { kind: "rejection", from: "1.92G", to: "1.98G", limit: "70 dB" },
  { kind: "return-loss", port: "1", from: "2.11G", to: "2.17G", limit: "16 dB" },
  { kind: "group-delay-variation", from: "2.112G", to: "2.168G", limit: "25 ns", window: "5 MHz", aperture: "1 MHz" },
];

/** Writes the receive filter and releases revision A; returns its public id. */
export async function writeReceiveFilter(engineer: Person): Promise<string> {
  const publicId = await write(engineer, "Receive band-pass, 1.92 to 1.98 GHz", RECEIVE_LINES);
  const version = (await readSpecification(engineer, publicId))?.revisions[0]?.version ?? "";
  const request = { idempotencyKey: newIdempotencyKey(), version };
  made("release a specification", await releaseRevision(engineer, publicId, request));
  return publicId;
}

export async function writeDraftSpecification(engineer: Person): Promise<void> {
  await write(engineer, "Transmit band-pass, 2.11 to 2.17 GHz", DRAFT_LINES);
}

async function write(engineer: Person, title: string, lines: readonly Line[]): Promise<string> {
  const fields: Record<string, string> = { title, ...TITLE_BLOCK };
  lines.forEach((line, index) => {
    for (const [field, text] of Object.entries(line)) fields[`lines.${index}.${field}`] = text;
  });
  const { publicId } = made("write a specification", await createSpecification(engineer, filledForm(fields)));
  return publicId;
}
