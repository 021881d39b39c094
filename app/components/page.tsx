// The frame of a page: margins, main region, sections, and the footer with the caution and the light switch.
import type { ReactNode } from "react";
import { ThemeSwitch } from "./theme-switch";

/** Holds title block and sections as direct children, so that the block sticks along the whole page. */
export function Page({ children, className = "" }: { children: ReactNode; className?: string }) {
  return (
    <div className="page-frame">
      <main id="content" tabIndex={-1} className={`outline-none ${className}`}>
        {children}
      </main>
      <PageFooter />
    </div>
  );
}

export function PageFooter() {
  return (
    <footer className="mt-14 flex flex-col gap-x-6 gap-y-3 border-t border-rule pt-2.5 pb-18 text-12 text-quiet tablet:flex-row tablet:items-center tablet:justify-between">
      <p>
        Scores speak of the submitted data only: no qualification, no first-article approval, no safety or emission
        approval.
      </p>
      <ThemeSwitch />
    </footer>
  );
}

interface SectionProps {
  title: ReactNode;
  /** Links and buttons at the right of the title. */
  tools?: ReactNode;
  /** A line in quiet under the title. */
  note?: ReactNode;
  id?: string;
  className?: string;
  children?: ReactNode;
}

export function Section({ title, tools, note, id, className = "", children }: SectionProps) {
  return (
    <section id={id} className={`mt-9 min-w-0 ${className}`}>
      <div className="flex flex-wrap items-end gap-x-5 gap-y-2 pb-2">
        <div className="min-w-0">
          <h2>{title}</h2>
          {note === undefined ? null : <p className="text-13 text-quiet">{note}</p>}
        </div>
        {tools === undefined ? null : (
          <div className="ml-auto flex flex-wrap items-center gap-x-5 gap-y-2 text-13 text-quiet print-hidden">
            {tools}
          </div>
        )}
      </div>
      {children}
    </section>
  );
}

/** Two columns from 1200 px on: what is drawn, and 468 px of table beside it. */
export function Split({ children, className = "" }: { children: ReactNode; className?: string }) {
  return (
    <div className={`grid grid-cols-1 gap-x-8 desktop:grid-cols-[minmax(0,1fr)_468px] print:block ${className}`}>
      {children}
    </div>
  );
}
