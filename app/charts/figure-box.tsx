// The leaf a drawing lies on: 5 to 4 on a desk, 470 px high on a phone, both served, the right one shown by the page's width.
import type { ReactNode } from "react";
import type { MeasuredFigure } from "./figure-size";
import { PHONE_HEIGHT } from "./layout";

interface FigureBoxProps extends MeasuredFigure {
  readonly desk: ReactNode;
  readonly phone: ReactNode;
}

/**
 * Keeps its height whatever it shows, so nothing moves when curves arrive or the true width is known. Paper takes the
 * desk's drawing where there is one.
 */
export function FigureBox({ widths, deskRef, phoneRef, desk, phone }: FigureBoxProps) {
  const hasDesk = widths.desk !== 0;
  return (
    <>
      <div
        ref={deskRef}
        className={`relative border border-rule bg-leaf max-tablet:hidden ${hasDesk ? "print:block" : ""}`}
        style={{ aspectRatio: "5 / 4" }}
      >
        {hasDesk ? desk : null}
      </div>
      <div
        ref={phoneRef}
        className={`relative -mx-4 border-y border-rule bg-leaf tablet:hidden ${hasDesk ? "print:hidden" : ""}`}
        style={{ height: PHONE_HEIGHT }}
      >
        {widths.phone === 0 ? null : phone}
      </div>
    </>
  );
}
