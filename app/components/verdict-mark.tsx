// The verdict marks: one shape and one word for each verdict, alone, beside its word, or inside a figure.
import type { Verdict as MeasuredVerdict } from "~/rf/index";

export type ShownVerdict = MeasuredVerdict | "declared" | "exception";

const words: Record<ShownVerdict, string> = {
  pass: "pass",
  "conditional-pass": "conditional pass",
  "conditional-fail": "conditional fail",
  fail: "fail",
  "not-covered": "not covered",
  declared: "declared",
  exception: "exception",
};

const colours: Record<ShownVerdict, string> = {
  pass: "text-pass",
  "conditional-pass": "text-near",
  "conditional-fail": "text-near",
  fail: "text-fail",
  "not-covered": "text-bare",
  declared: "text-quiet",
  exception: "text-near",
};

const tints: Partial<Record<ShownVerdict, string>> = {
  "conditional-pass": "bg-near/16",
  "conditional-fail": "bg-near/16",
  fail: "bg-fail/16",
  "not-covered": "bg-bare/16",
};

/** The word of a verdict, as it is read out and printed. */
export const verdictWord = (verdict: ShownVerdict): string => words[verdict];

/** The text colour class of a verdict. */
export const verdictColour = (verdict: ShownVerdict): string => colours[verdict];

/** The 16 % tint of a cell that does not comply under the RFQ's decision rule; empty where it complies. */
export const verdictTint = (verdict: ShownVerdict, complies: boolean): string =>
  complies ? "" : (tints[verdict] ?? "");

const square = "M3.75 3.75h8.5v8.5h-8.5z";

/** The bare shape in a box of 16 by 16 in currentColor, for use inside a figure's own svg. */
export function VerdictShape({ verdict }: { verdict: ShownVerdict }) {
  switch (verdict) {
    case "pass":
      return <circle cx="8" cy="8" r="5" fill="currentColor" />;
    case "conditional-pass":
      return <path d="M3 8.5a5 5 0 0 1 10 0h2v2H1v-2z" fill="currentColor" />;
    case "conditional-fail":
      return <path d="M3 7.5a5 5 0 0 0 10 0h2v-2H1v2z" fill="currentColor" />;
    case "fail":
      return <path d="M3.5 3.5l9 9M12.5 3.5l-9 9" fill="none" stroke="currentColor" strokeWidth="2.25" />;
    case "not-covered":
      return <circle cx="8" cy="8" r="4.25" fill="none" stroke="currentColor" strokeWidth="1.75" />;
    case "declared":
      return <path d={square} fill="none" stroke="currentColor" strokeWidth="1.5" />;
    case "exception":
      return <path d={`${square}M3.75 12.25l8.5-8.5`} fill="none" stroke="currentColor" strokeWidth="1.5" />;
  }
}

interface MarkProps {
  verdict: ShownVerdict;
  /** Pixels: 16 beside the word, 12 in matrix cells. */
  size?: 16 | 12;
  /** The mark stands beside text that says the same: hidden from assistive technology. */
  silent?: boolean;
}

/** A mark without its word; the word is its accessible name. */
export function VerdictMark({ verdict, size = 16, silent = false }: MarkProps) {
  const name = silent ? { "aria-hidden": true } : { role: "img", "aria-label": words[verdict] };
  return (
    <svg
      {...name}
      className={`mark-beside-text inline-block ${colours[verdict]}`}
      width={size}
      height={size}
      viewBox="0 0 16 16"
    >
      <VerdictShape verdict={verdict} />
    </svg>
  );
}

interface VerdictProps {
  verdict: ShownVerdict;
  size?: 16 | 12;
  /** @default true beside a 16 px mark, false beside a 12 px one */
  word?: boolean;
}

/** A verdict as mark and word. */
export function Verdict({ verdict, size = 16, word = size === 16 }: VerdictProps) {
  if (!word) return <VerdictMark verdict={verdict} size={size} />;
  return (
    <span className={`inline-flex items-center gap-1.75 ${colours[verdict]}`}>
      <VerdictMark verdict={verdict} size={size} silent />
      <span>{words[verdict]}</span>
    </span>
  );
}
