// Links over a list: views by state with their counts, and pages.
import { Link } from "react-router";

interface View {
  label: string;
  count: number;
  to: string;
  isCurrent: boolean;
}

/** The ways to narrow a list, each with how many rows it holds. */
export function ListViews({ label, views }: { label: string; views: readonly View[] }) {
  return (
    <nav aria-label={label} className="print-hidden border-b border-rule">
      <ul className="flex flex-wrap gap-x-7">
        {views.map((view) => (
          <li key={view.label}>
            <Link
              to={view.to}
              aria-current={view.isCurrent ? "page" : undefined}
              className="-mb-px block border-b-2 border-transparent pt-3 pb-2.5 text-13 text-quiet no-underline transition-colors hover:text-ink aria-[current=page]:border-signal aria-[current=page]:font-semibold aria-[current=page]:text-ink"
            >
              {view.label} <span className="font-normal text-quiet tabular-nums">{view.count}</span>
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  );
}

interface PagerProps {
  /** From 1. */
  page: number;
  pages: number;
  to: (page: number) => string;
}

/** Nothing where one page holds all. */
export function Pager({ page, pages, to }: PagerProps) {
  if (pages <= 1 && page === 1) return null;
  const last = Math.min(page - 1, pages);
  return (
    <nav aria-label="Pages" className="print-hidden mt-3 flex items-center gap-5 text-13 text-quiet">
      {page > 1 ? <Link to={to(last)}>Previous</Link> : null}
      <span>
        Page {page} of {pages}
      </span>
      {page < pages ? <Link to={to(page + 1)}>Next</Link> : null}
    </nav>
  );
}
