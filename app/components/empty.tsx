// What stands where nothing is yet: the outline of an empty mask, one sentence, one verb.
import type { ReactNode } from "react";

interface EmptyProps {
  /** A few words in bold over the sentence. */
  title?: string;
  sentence: ReactNode;
  /** A LinkButton or a small form. */
  verb?: ReactNode;
  className?: string;
}

export function Empty({ title, sentence, verb, className = "" }: EmptyProps) {
  return (
    <div className={`border border-dashed border-edge px-6 py-5.5 ${className}`}>
      <svg
        aria-hidden
        className="text-edge"
        width="72"
        height="56"
        viewBox="0 0 72 56"
        fill="none"
        stroke="currentColor"
        strokeWidth="1.5"
      >
        <path d="M2 33h21V4M70 33H49V4M30 54V19h12v35" />
      </svg>
      {title === undefined ? null : <p className="mt-3 font-bold">{title}</p>}
      <p className={`max-w-130 text-13 text-quiet ${title === undefined ? "mt-3" : ""}`}>{sentence}</p>
      {verb === undefined ? null : <div className="mt-3">{verb}</div>}
    </div>
  );
}
