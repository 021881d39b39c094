// How wide a figure really is, so that its type is 12 px: measured once the page runs, fixed proportions before.
import { useEffect, useRef, useState, type RefObject } from "react";

export interface FigureWidths {
  /** px of the box for desks and of the one for phones; 0 where it is hidden, undefined before it is measured. */
  readonly desk: number | undefined;
  readonly phone: number | undefined;
}

export interface MeasuredFigure {
  readonly widths: FigureWidths;
  readonly deskRef: RefObject<HTMLDivElement | null>;
  readonly phoneRef: RefObject<HTMLDivElement | null>;
}

/** px below which there is no room for the axes; a box of a collapsed column still has its margins' width. */
const NARROWEST = 160;

const drawable = (width: number | undefined) => (width !== undefined && width < NARROWEST ? 0 : width);

/** Measures both boxes of a figure; one of them is hidden by the page's width. */
export function useFigureWidths(): MeasuredFigure {
  const deskRef = useRef<HTMLDivElement>(null);
  const phoneRef = useRef<HTMLDivElement>(null);
  const [widths, setWidths] = useState<FigureWidths>({ desk: undefined, phone: undefined });
  useEffect(() => {
    const measure = () => {
      const desk = drawable(deskRef.current?.clientWidth);
      const phone = drawable(phoneRef.current?.clientWidth);
      // Neither shows while an ancestor is hidden: the last known stays.
      if (desk || phone) setWidths((known) => (known.desk === desk && known.phone === phone ? known : { desk, phone }));
    };
    const observer = new ResizeObserver(measure);
    for (const box of [deskRef.current, phoneRef.current]) if (box) observer.observe(box);
    return () => observer.disconnect();
  }, []);
  return { deskRef, phoneRef, widths };
}

/** Measures one box; undefined before the page runs. */
export function useBoxWidth(): { readonly ref: RefObject<HTMLDivElement | null>; readonly width: number | undefined } {
  const ref = useRef<HTMLDivElement>(null);
  const [width, setWidth] = useState<number>();
  useEffect(() => {
    const box = ref.current;
    if (!box) return;
    const observer = new ResizeObserver(() => {
      const measured = drawable(box.clientWidth);
      if (measured) setWidth(measured);
    });
    observer.observe(box);
    return () => observer.disconnect();
  }, []);
  return { ref, width };
}
