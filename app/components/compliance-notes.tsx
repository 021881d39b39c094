// "What this data does not show": lines not covered, what was assumed, and doubts about files and lot, each with its place.
import { SETUP_FIELDS } from "~/forms/setup";
import { isMeasured } from "~/rf/index";
import { celsiusWords, type ComplianceLine } from "./compliance-words";
import { Section } from "./page";

interface NotePlace {
  readonly unit: string;
  /** Null for a note on a unit at all temperatures. */
  readonly celsius: number | null;
  /** Names of the files it is about, where it is about several. */
  readonly files?: readonly string[];
  readonly message: string;
}

export interface DataNoteView {
  readonly code: string;
  readonly severity: "repaired" | "doubtful";
  readonly lineNumber: string | null;
  readonly places: readonly NotePlace[];
}

interface NotesProps {
  lines: readonly ComplianceLine[];
  notes: readonly DataNoteView[];
  /** Setup fields that were not stated of every sweep. */
  assumed: readonly string[];
  basis: "measured" | "similar" | "simulated";
}

export function ComplianceNotes({ lines, notes, assumed, basis }: NotesProps) {
  const sentences = [...caveats(assumed, basis), ...notCovered(lines)];
  return (
    <Section title="What this data does not show">
      {sentences.length === 0 && notes.length === 0 ? (
        <p className="text-13 text-quiet">Nothing was found doubtful.</p>
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

/** More places than this are folded. */
const MOST_PLACES = 4;

function NoteWords({ note }: { note: DataNoteView }) {
  const [first, ...rest] = note.places;
  if (!first) return null;
  const line = note.lineNumber === null ? "" : `Line ${note.lineNumber}. `;
  const repaired = note.severity === "repaired" ? " Repaired on reading." : "";
  const isAlike = rest.every(({ message }) => message === first.message);
  if (rest.length === 0 || (isAlike && rest.length <= MOST_PLACES))
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
            {isAlike ? null : place.message} <span className="text-quiet">{placeWords(place)}</span>
          </li>
        ))}
      </ul>
    </details>
  );
}

const placeWords = ({ unit, celsius, files = [] }: NotePlace): string =>
  [`unit ${unit}`, ...(celsius === null ? [] : [celsiusWords(celsius)]), ...files].join(", ");

function caveats(assumed: readonly string[], basis: NotesProps["basis"]): string[] {
  const fields = SETUP_FIELDS.filter(({ field }) => assumed.includes(field)).map(({ label }) =>
    lowerFirst(label).replace(/, ±$/, ""),
  );
  const origin = basis === "similar" ? "of a similar part" : "simulated";
  return [
    ...(basis === "measured" ? [] : [`The data is ${origin}: no line exceeds a conditional pass.`]),
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
