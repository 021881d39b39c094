// Parts of a table of data: frame that scrolls in itself, heads that sort by a link, rows, groups and figure cells.
import { ArrowDown, ArrowUp } from "lucide-react";
import type { ComponentProps, ReactNode } from "react";
import { Link } from "react-router";

interface TableProps {
  /** Names the table and the region it scrolls in. */
  label: string;
  /** Height of rows: 36, 44 with a second line, 56 in a comparison; 52 on phones. @default "plain" */
  rows?: "plain" | "two-line" | "comparison";
  /**
   * "page": the head sticks under the title block from 1200 px on, below that the table scrolls sideways.
   * "inside": for tables wider than a page, scrolls both ways with head and first column (`RowHead`) in sight.
   *
   * @default "page"
   */
  scroll?: "page" | "inside";
  /**
   * On phones each row is a block of two columns without a head, its cells in the order of the row unless an `order` says
   * otherwise; `data-label` of a cell stands over it there. @default false
   */
  stacks?: boolean;
  className?: string;
  /** `<thead>` and `<tbody>`. */
  children: ReactNode;
}

export function Table({ label, rows = "plain", scroll = "page", stacks, className = "", children }: TableProps) {
  return (
    <div role="region" aria-label={label} tabIndex={0} className="data-table-frame" data-scroll={scroll}>
      <table
        // Said because a browser may drop it from a table that is laid out as blocks, here and of its rows and cells.
        role="table"
        aria-label={label}
        className={`data-table ${className}`}
        data-rows={rows}
        data-stacks={stacks ? "" : undefined}
      >
        {children}
      </table>
    </div>
  );
}

export type SortDirection = "ascending" | "descending";

interface HeadCellProps extends Omit<ComponentProps<"th">, "aria-sort"> {
  /** Right-aligned, over figures. */
  figure?: boolean;
  /** A rule at the left, between units. */
  parted?: boolean;
  /** Where pressing sorts; the direction is that of the rows as they stand, absent if another column sorts. */
  sort?: { to: string; direction?: SortDirection | undefined };
}

const cellClasses = (figure: boolean | undefined, parted: boolean | undefined, className = ""): string =>
  [figure ? "data-table-figure" : "", parted ? "data-table-parted" : "", className].filter(Boolean).join(" ");

export function HeadCell({ figure, parted, sort, className, children, ...rest }: HeadCellProps) {
  const sorting = sort === undefined ? {} : { "aria-sort": sort.direction ?? ("none" as const) };
  return (
    <th role="columnheader" scope="col" {...rest} {...sorting} className={cellClasses(figure, parted, className)}>
      {sort === undefined ? children : <SortLink sort={sort}>{children}</SortLink>}
    </th>
  );
}

function SortLink({ sort, children }: { sort: NonNullable<HeadCellProps["sort"]>; children: ReactNode }) {
  const Arrow = sort.direction === "descending" ? ArrowDown : ArrowUp;
  return (
    <Link
      to={sort.to}
      preventScrollReset
      className={`-my-1 inline-flex items-center gap-1 py-1 no-underline hover:text-ink hover:underline ${sort.direction ? "font-semibold text-ink" : "text-quiet"}`}
    >
      {children}
      {sort.direction ? <Arrow size={14} strokeWidth={2} aria-hidden /> : null}
    </Link>
  );
}

export function Row({ selected, ...rest }: ComponentProps<"tr"> & { selected?: boolean }) {
  return <tr role="row" {...rest} data-selected={selected ? "" : undefined} />;
}

/** The first cell of a row: line number, supplier, unit. */
export function RowHead({ className, ...rest }: ComponentProps<"th">) {
  return <th role="rowheader" scope="row" {...rest} className={className} />;
}

interface CellProps extends ComponentProps<"td"> {
  figure?: boolean;
  parted?: boolean;
  /** Where the table stacks: what the head says at other widths. */
  "data-label"?: string;
}

export function Cell({ figure, parted, className, ...rest }: CellProps) {
  return <td role="cell" {...rest} className={cellClasses(figure, parted, className)} />;
}

/** A line over the rows of one kind: "2 Passband". */
export function GroupRow({ number, columns, children }: { number?: ReactNode; columns: number; children: ReactNode }) {
  return (
    <tr className="data-table-group">
      {number === undefined ? null : <td>{number}</td>}
      <th scope="colgroup" colSpan={number === undefined ? columns : columns - 1}>
        {children}
      </th>
    </tr>
  );
}

/** A cell of two lines: requirement over band, name over reference. */
export function TwoLines({ upper, lower }: { upper: ReactNode; lower: ReactNode }) {
  return (
    <>
      <span className="block text-13/4.5">{upper}</span>
      <span className="block text-12 font-normal text-quiet">{lower}</span>
    </>
  );
}
