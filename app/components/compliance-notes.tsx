// "What this data does not show": evidence missing, lines not covered, and doubts about the files, each with its place.
import { SETUP_FIELDS } from "~/forms/setup";
import { isMeasured } from "~/rf/index";
import { celsiusWords, type ComplianceLine } from "./compliance-words";
import { Section } from "./page";

export interface DataNoteView {
  readonly code: string;
  readonly severity: "repaired" | "doubtful";
  readonly lineNumber: string | null;
  readonly places: readonly { readonly unit: string; readonly celsius: number; readonly message: string }[];
}

export interface EvidenceView {
  readonly unitsAsked: number;
  readonly unitsOverRangeAsked: number;
  readonly units: number;
  readonly unitsOverRange: number;
  readonly temperatures: number;
  readonly assumed: readonly string[];
}

interface NotesProps {
  lines: readonly ComplianceLine[];
  notes: readonly DataNoteView[];
  evidence: EvidenceView | null;
  basis: "measured" | "similar" | "simulated";
}

export function ComplianceNotes({ lines, notes, evidence, basis }: NotesProps) {
  const sentences = [...missingEvidence(evidence, basis), ...notCovered(lines)];
  return (
    <Section title="What this data does not show">
      {sentences.length === 0 && notes.length === 0 ? (
        <p className="text-13 text-quiet">Nothing was found missing or doubtful.</p>
      ) : (
        <ul className="text-13">
          {sentences.map((sentence) => (
            <li key={sentence} className="border-b border-rule py-2">
              {sentence}
            </li>
          ))}
          {notes.map((note) => (
            <li key={`${note.code} ${note.lineNumber ?? ""}`} className="border-b border-rule py-2">
              <NoteWords note={note} />
            </li>
          ))}
        </ul>
      )}
    </Section>
  );
}

function NoteWords({ note }: { note: DataNoteView }) {
  const [first, ...rest] = note.places;
  if (!first) return null;
  const line = note.lineNumber === null ? "" : `Line ${note.lineNumber}. `;
  const repaired = note.severity === "repaired" ? " Repaired on reading." : "";
  const isAlike = rest.every(({ message }) => message === first.message);
  if (rest.length === 0 || isAlike)
    return (
      <>
        {line}
        {first.message}
        {repaired} <span className="text-quiet">{note.places.map(placeWords).join("; ")}</span>
      </>
    );
  return (
    <details>
      <summary>
        {line}
        {first.message}
        {repaired}{" "}
        <span className="text-quiet">
          {placeWords(first)} and {rest.length} more
        </span>
      </summary>
      <ul className="mt-1 pl-4">
        {rest.map((place) => (
          <li key={placeWords(place)}>
            {place.message} <span className="text-quiet">{placeWords(place)}</span>
          </li>
        ))}
      </ul>
    </details>
  );
}

const placeWords = ({ unit, celsius }: { unit: string; celsius: number }): string =>
  `unit ${unit}, ${celsiusWords(celsius)}`;

const counted = (count: number): string => `${count} ${count === 1 ? "unit" : "units"}`;

function missingEvidence(evidence: EvidenceView | null, basis: NotesProps["basis"]): string[] {
  if (!evidence) return [];
  const { units, unitsAsked, unitsOverRange, unitsOverRangeAsked, assumed } = evidence;
  const fields = SETUP_FIELDS.filter(({ field }) => assumed.includes(field)).map(({ label }) =>
    lowerFirst(label).replace(/, ±$/, ""),
  );
  return [
    ...(basis === "measured"
      ? []
      : [
          `The data is ${basis === "similar" ? "of a similar part" : "simulated"}: no line exceeds a conditional pass.`,
        ]),
    ...(units < unitsAsked ? [`${counted(unitsAsked)} asked, ${units} measured.`] : []),
    ...(unitsOverRange < unitsOverRangeAsked
      ? [
          `${counted(unitsOverRangeAsked)} over temperature asked, ${unitsOverRange === 0 ? "none" : unitsOverRange} measured.`,
        ]
      : []),
    ...(fields.length > 0 ? [`Not stated, assumed as the RFQ says: ${fields.join("; ")}.`] : []),
  ];
}

const lowerFirst = (text: string): string => text.charAt(0).toLowerCase() + text.slice(1);

function notCovered(lines: readonly ComplianceLine[]): string[] {
  const byReason = new Map<string, string[]>();
  for (const { definition, verdict, reason, lineNumber } of lines)
    if (isMeasured(definition) && verdict === "not-covered")
      byReason.set(reason ?? "", [...(byReason.get(reason ?? "") ?? []), lineNumber]);
  return [...byReason].map(([reason, numbers]) => {
    const subject = numbers.length === 1 ? `Line ${numbers.join("")} is` : `Lines ${numbers.join(", ")} are`;
    return `${subject} not covered${reason === "" ? "." : `: ${reason}`}`;
  });
}
