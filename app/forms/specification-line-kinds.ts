// Kinds of lines a specification can have, and which fields of the form's row each takes.
import type { FormValues } from "~/forms/fields";
import type { Requirement } from "~/rf/contract";

/** A line the supplier states instead of measuring: what, and the limit in words. */
export interface DeclaredRequirement {
  readonly id: string;
  readonly kind: "declared";
  readonly name: string;
  readonly limit: string;
}

export type SpecificationRequirement = Requirement | DeclaredRequirement;
export type SpecificationLineKind = SpecificationRequirement["kind"];

/** Every kind, in the order of their groups. */
export const LINE_KINDS = [
  "insertion-loss",
  "ripple",
  "centre-frequency",
  "bandwidth",
  "rejection",
  "reverse-isolation",
  "shape-factor",
  "return-loss",
  "group-delay",
  "group-delay-variation",
  "phase-linearity",
  "declared",
] as const satisfies readonly SpecificationLineKind[];

/** The unit a bare frequency is in. */
export const FREQUENCY_UNIT = "MHz";

/** Fields of a row that are typed; besides them `kind`, `port`, `temperature` and `lineKey`. */
export const TEXT_FIELDS = [
  "from",
  "to",
  "limit",
  "limitEnd",
  "nominal",
  "least",
  "largest",
  "level",
  "levelEnd",
  "relativeFrom",
  "relativeTo",
  "withinFrom",
  "withinTo",
  "window",
  "aperture",
  "maxStep",
  "name",
] as const;

export type TextField = (typeof TEXT_FIELDS)[number];

/** Centre, bandwidth and shape factor lie where the response crosses a level: they have no band, at most one to seek the peak in. */
const SOUGHT = ["withinFrom", "withinTo", "maxStep"] as const;

export const LINE_FIELDS: Readonly<Record<SpecificationLineKind, readonly TextField[]>> = {
  "insertion-loss": ["from", "to", "limit", "limitEnd", "maxStep"],
  ripple: ["from", "to", "limit", "window", "maxStep"],
  "centre-frequency": ["nominal", "limit", "level", ...SOUGHT],
  bandwidth: ["least", "largest", "level", ...SOUGHT],
  rejection: ["from", "to", "limit", "limitEnd", "relativeFrom", "relativeTo", "maxStep"],
  "reverse-isolation": ["from", "to", "limit", "limitEnd", "maxStep"],
  "shape-factor": ["level", "levelEnd", "limit", ...SOUGHT],
  "return-loss": ["from", "to", "limit", "limitEnd", "maxStep"],
  "group-delay": ["from", "to", "limit", "aperture", "maxStep"],
  "group-delay-variation": ["from", "to", "limit", "window", "aperture", "maxStep"],
  "phase-linearity": ["from", "to", "limit", "maxStep"],
  declared: ["name", "limit"],
};

export const kindOf = (fields: FormValues): SpecificationLineKind | undefined =>
  LINE_KINDS.find((kind) => kind === fields.kind);

export const isBlank = (text: string | undefined): boolean => (text ?? "").trim() === "";

/** A row whose kind and text are blank was never begun. */
export const isBlankLine = (fields: FormValues): boolean =>
  isBlank(fields.kind) && TEXT_FIELDS.every((field) => isBlank(fields[field]));
