// The leaf a drawing lies on: 5 to 4 on a desk, 470 px high on a phone, both served, the right one shown by the page's width.
import type { ReactNode } from "react";
import type { MeasuredFigure } from "./figure-size";
import { DESK_ASPECT, PHONE_HEIGHT } from "./layout";

interface FigureBoxProps extends MeasuredFigure {
  /** Height of the desk's figure as a share of its width. @default 0.8 */
  readonly aspect?: number;
  /** px of the phone's. @default 470 */
  readonly phoneHeight?: number;
  readonly desk: ReactNode;
  readonly phone: ReactNode;
}

/**
 * Keeps its height whatever it shows, so nothing moves when curves arrive or the true width is known. Paper takes the
 * desk's drawing where there is one.
 */
export function FigureBox(props: FigureBoxProps) {
  const { widths, deskRef, phoneRef, desk, phone, aspect = DESK_ASPECT, phoneHeight = PHONE_HEIGHT } = props;
  const hasDesk = widths.desk !== 0;
  return (
    <>
      <div
        ref={deskRef}
        className={`relative border border-rule bg-leaf max-tablet:hidden ${hasDesk ? "print:block" : ""}`}
        style={{ aspectRatio: `1 / ${aspect}` }}
      >
        {hasDesk ? desk : null}
      </div>
      <div
        ref={phoneRef}
        className={`relative -mx-4 border-y border-rule bg-leaf tablet:hidden ${hasDesk ? "print:hidden" : ""}`}
        style={{ height: phoneHeight }}
      >
        {widths.phone === 0 ? null : phone}
      </div>
    </>
  );
}
