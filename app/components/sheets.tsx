// Links to the sheets of one RFQ or quote, under its title block.
import { NavLink } from "react-router";

export interface Sheet {
  to: string;
  label: string;
  /** Also current on the pages below it. @default false */
  includesBelow?: boolean;
}

export function Sheets({ items, label = "Sheets" }: { items: readonly Sheet[]; label?: string }) {
  return (
    <nav aria-label={label} className="print-hidden border-b border-rule">
      <ul className="flex flex-wrap gap-x-7 max-tablet:flex-nowrap max-tablet:gap-x-3.5 max-tablet:overflow-x-auto">
        {items.map((item) => (
          <li key={item.to}>
            <NavLink
              to={item.to}
              end={!item.includesBelow}
              className="-mb-px block border-b-2 border-transparent pt-3 pb-2.5 text-13 text-quiet no-underline transition-colors hover:text-ink aria-[current=page]:border-signal aria-[current=page]:font-semibold aria-[current=page]:text-ink"
            >
              {item.label}
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}
