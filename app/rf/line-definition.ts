// What a line of a specification asks for, as stored: a measured requirement without its id, or a declared one.
import type { Requirement } from "./contract.ts";

type WithoutId<R> = R extends { readonly id: string } ? Omit<R, "id"> : never;

/** A line the supplier states instead of measuring: a name and the limit in words. */
export interface DeclaredDefinition {
  readonly kind: "declared";
  readonly name: string;
  readonly limit: string;
}

export type MeasuredDefinition = WithoutId<Requirement>;
export type RequirementDefinition = MeasuredDefinition | DeclaredDefinition;

/** A line of a revision: its key through all revisions, its number in this one, and what it asks. */
export interface SpecificationLine {
  readonly lineKey: string;
  readonly lineNumber: string;
  readonly definition: RequirementDefinition;
}

export const isMeasured = (definition: RequirementDefinition): definition is MeasuredDefinition =>
  definition.kind !== "declared";

/** The measured lines as the evaluation takes them, with the line key as id. */
export function measuredRequirements(lines: readonly SpecificationLine[]): Requirement[] {
  return lines.flatMap(({ lineKey, definition }) => (isMeasured(definition) ? [{ ...definition, id: lineKey }] : []));
}
