// A figure's values as a table that scrolls in itself under the figure.

interface FigureTableProps {
  readonly caption: string;
  /** The first is of the row heads. */
  readonly heads: readonly string[];
  readonly rows: readonly (readonly string[])[];
  /** @default "Values of the figure" */
  readonly label?: string;
}

export function FigureTable({ caption, heads, rows, label = "Values of the figure" }: FigureTableProps) {
  const [first, ...others] = heads;
  return (
    <div
      className="relative mt-3 max-h-[420px] overflow-auto border border-rule bg-leaf px-4"
      tabIndex={0}
      role="region"
      aria-label={label}
    >
      <table className="w-full text-13 tabular-nums">
        <caption className="py-2 text-left text-12 text-quiet">{caption}</caption>
        <thead>
          <tr className="text-12 text-quiet">
            <th scope="col" className="sticky top-0 bg-leaf py-2 pr-3 text-left font-normal">
              {first}
            </th>
            {others.map((head) => (
              <th key={head} scope="col" className="sticky top-0 bg-leaf py-2 pl-3 text-right font-normal">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map(([head = "", ...cells], row) => (
            <tr key={`${row} ${head}`} className="border-t border-rule">
              <th scope="row" className="py-1 pr-3 text-left font-normal whitespace-nowrap">
                {head}
              </th>
              {cells.map((cell, index) => (
                <td key={heads[index + 1]} className="py-1 pl-3 text-right whitespace-nowrap">
                  {cell}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
