// Collects what the reader repaired or doubts: one note a kind, with its first place and how often it occurred.

import type { Note, NoteCode } from "./contract.ts";

interface Entry {
  readonly line: number;
  readonly frequency?: number;
  count: number;
}

interface Wording {
  readonly severity: Note["severity"];
  readonly message: (count: number) => string;
}

const plural = (count: number, one: string, many: string) => (count === 1 ? `1 ${one}` : `${count} ${many}`);

const WORDINGS = {
  "default-option-line": {
    severity: "doubtful",
    message: () => "No option line: GHz, S, magnitude and angle, 50 ohm were assumed.",
  },
  "default-data-order": {
    severity: "doubtful",
    message: () => "[Two-Port Data Order] is missing: 21_12 was assumed.",
  },
  "missing-end": {
    severity: "repaired",
    message: () => "[End] is missing; the stated number of frequencies is there.",
  },
  "keyword-indented": {
    severity: "repaired",
    message: (count) => `${plural(count, "keyword does", "keywords do")} not start in the first column.`,
  },
  "noise-count-missing": {
    severity: "repaired",
    message: () => "[Noise Data] without [Number of Noise Frequencies].",
  },
  "repeated-frequency": {
    severity: "repaired",
    message: (count) =>
      `${plural(count, "point repeats", "points repeat")} the one before, number by number; read once.`,
  },
  "byte-order-mark": { severity: "repaired", message: () => "The file starts with a byte order mark; it was skipped." },
  "carriage-return-line-ends": {
    severity: "repaired",
    message: (count) => `${plural(count, "line ends", "lines end")} with a bare carriage return.`,
  },
  "utf-16": { severity: "repaired", message: () => "The file is UTF-16 text; it was decoded." },
  "latin-1": {
    severity: "repaired",
    message: (count) => `${plural(count, "comment is", "comments are")} not UTF-8; read as Latin-1.`,
  },
  "fortran-exponent": {
    severity: "repaired",
    message: (count) => `${plural(count, "number has", "numbers have")} a Fortran exponent (D); read as E.`,
  },
  "trailing-separator": {
    severity: "repaired",
    message: (count) => `${plural(count, "line ends", "lines end")} with a comma or semicolon; it was skipped.`,
  },
  "comments-cut": {
    severity: "repaired",
    message: (count) => `${plural(count, "comment was", "comments were")} left out or shortened: 1,000 lines are kept.`,
  },
  "noise-data-skipped": {
    severity: "repaired",
    message: (count) => `${plural(count, "row", "rows")} of noise data skipped: they are no S-parameters.`,
  },
} satisfies Partial<Record<NoteCode, Wording>>;

export type ReaderNoteCode = keyof typeof WORDINGS;

export class ReaderNotes {
  private readonly entries = new Map<ReaderNoteCode, Entry>();

  /**
   * Counts one occurrence; the first one's place is kept.
   *
   * @param frequency Hz
   */
  add(code: ReaderNoteCode, line: number, frequency?: number): void {
    const entry = this.entries.get(code);
    if (entry) entry.count += 1;
    else this.entries.set(code, frequency === undefined ? { line, count: 1 } : { line, frequency, count: 1 });
  }

  toNotes(): Note[] {
    return [...this.entries].map(([code, { line, frequency, count }]) => {
      const { severity, message }: Wording = WORDINGS[code];
      const note = { code, severity, message: message(count), line };
      return frequency === undefined ? note : { ...note, frequency: [frequency, frequency] as const };
    });
  }
}
