// Pairs of a name and what it says, as a table without a head.
import type { ReactNode } from "react";
import { Cell, Row, RowHead, Table } from "./data-table";

export type QuoteFact = readonly [name: string, value: ReactNode];

interface QuoteFactsProps {
  label: string;
  rows: readonly QuoteFact[];
  /** Right-aligned figures. */
  figures?: boolean;
  /** Names are whole phrases and take half of the width. @default false */
  longNames?: boolean;
}

export function QuoteFacts({ label, rows, figures = false, longNames = false }: QuoteFactsProps) {
  const width = longNames ? "w-1/2" : "w-44";
  return (
    <Table label={label} className="border-t-[1.5px] border-ink">
      <tbody>
        {rows.map(([name, value]) => (
          <Row key={name}>
            <RowHead className={`font-normal! text-quiet ${figures ? "" : width}`}>{name}</RowHead>
            <Cell figure={figures}>{value}</Cell>
          </Row>
        ))}
      </tbody>
    </Table>
  );
}
