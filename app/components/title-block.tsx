// The title block of a page: number, title and states in a row that sticks, facts in a row that scrolls away.
import type { CSSProperties, ReactNode } from "react";
import { titleWidthPx } from "./title-width";

export interface TitleBlockCell {
  label: string;
  value: ReactNode;
  /** Of a row 1 cell: 104 px (revision, version, sheet), 118 (status), 196 (verdict). @default last "status", others "sheet" */
  width?: "sheet" | "status" | "verdict";
}

interface TitleBlockProps {
  /** The number is left out on pages that have none. At most 90 characters of title. */
  heading: { number?: ReactNode; title: string; caption?: string };
  numberLabel?: string;
  titleLabel?: string;
  /** Right of the title: revision, version or sheet, then status or verdict. */
  cells?: readonly TitleBlockCell[];
  /** Row 2: five or six cells. */
  facts?: readonly TitleBlockCell[];
  /** One filled button at most. */
  actions?: ReactNode;
}

type Variables = CSSProperties & Record<`--${string}`, string>;

/** Pixels of a row 1 cell: from 1200, and between 720 and that. */
const widths = { sheet: [104, 84], status: [118, 104], verdict: [196, 168] } as const;

const titleStyle = (title: string): Variables => ({ "--title-width": `${titleWidthPx(title)}px` });

function columnsStyle(cells: readonly TitleBlockCell[]): Variables {
  const pairs = cells.map((cell, k) => widths[cell.width ?? (k === cells.length - 1 ? "status" : "sheet")]);
  return {
    "--title-block-states": pairs.map(([wide]) => `${wide}px`).join(" "),
    "--title-block-states-narrow": pairs.map(([, narrow]) => `${narrow}px`).join(" "),
  };
}

/** The heading of a page (`h1` is the title). Stands directly in `Page`, whose height is the way it sticks along. */
export function TitleBlock(props: TitleBlockProps) {
  const { heading, numberLabel = "Number", titleLabel = heading.caption ?? "Title", cells = [], facts = [] } = props;
  const hasNumber = heading.number !== undefined;
  const end = facts.length > 0 ? "" : "title-block-end";
  return (
    <>
      <header className="title-block" style={columnsStyle(cells)} data-number={hasNumber}>
        <div className={`title-block-lead ${props.actions ? "" : end}`}>
          {hasNumber || cells.length > 0 ? (
            <div className="title-block-stick">
              {hasNumber ? <Cell part="number" label={numberLabel} value={heading.number} /> : null}
              {cells.map((cell) => (
                <Cell key={cell.label} part="state" {...cell} />
              ))}
            </div>
          ) : null}
          <div
            className={`title-block-cell title-block-title ${props.actions ? "" : end}`}
            style={titleStyle(heading.title)}
          >
            <span className="title-block-caption">{titleLabel}</span>
            <h1>{heading.title}</h1>
          </div>
        </div>
        {props.actions ? <div className={`title-block-actions ${end}`}>{props.actions}</div> : null}
      </header>
      {facts.length > 0 ? <Facts facts={facts} /> : null}
    </>
  );
}

function Cell({ part, label, value }: TitleBlockCell & { part: "number" | "state" }) {
  return (
    <div className={`title-block-cell title-block-${part}`}>
      <span className="title-block-caption">{label}</span>
      <span className="block">{value}</span>
    </div>
  );
}

function Facts({ facts }: { facts: readonly TitleBlockCell[] }) {
  return (
    <div className="title-block-facts">
      <dl>
        {facts.map((fact) => (
          <div key={fact.label} className="title-block-cell">
            <dt className="title-block-caption">{fact.label}</dt>
            <dd>{fact.value}</dd>
          </div>
        ))}
      </dl>
    </div>
  );
}
