// Dragging files of the list onto a place: which are dragged, which place they are over.
import { useRef, useState, type DragEvent } from "react";

/** Names what is dragged: files from outside the page are not taken here. */
const KIND = "application/x-measurements";

export interface DropTarget {
  readonly isOver: boolean;
  readonly onDragOver: (event: DragEvent) => void;
  readonly onDragLeave: (event: DragEvent) => void;
  readonly onDrop: (event: DragEvent) => void;
}

export interface Dragging {
  /** Ids; empty while nothing is dragged. */
  readonly ids: readonly string[];
  readonly start: (event: DragEvent, ids: readonly string[]) => void;
  readonly end: () => void;
  /** @param key names the place on the page */
  readonly target: (key: string, onDropped: (ids: readonly string[]) => void) => DropTarget;
}

export function useDragging(): Dragging {
  const [ids, setIds] = useState<readonly string[]>([]);
  const [over, setOver] = useState<string | null>(null);
  /** The same at once: a quick drop comes before the page is drawn anew. */
  const dragged = useRef<readonly string[]>([]);
  const end = () => {
    dragged.current = [];
    setIds([]);
    setOver(null);
  };
  return {
    ids,
    end,
    start: (event, taken) => {
      event.dataTransfer.setData(KIND, taken.join(" "));
      event.dataTransfer.effectAllowed = "move";
      dragged.current = taken;
      // A page that changes while a drag begins may end it at once.
      setTimeout(() => setIds(dragged.current));
    },
    target: (key, onDropped) => ({
      isOver: over === key,
      onDragOver: (event) => {
        if (dragged.current.length === 0) return;
        event.preventDefault();
        event.dataTransfer.dropEffect = "move";
        if (over !== key) setOver(key);
      },
      onDragLeave: (event) => {
        const goesTo = event.relatedTarget;
        if (goesTo instanceof Node && event.currentTarget.contains(goesTo)) return;
        setOver((current) => (current === key ? null : current));
      },
      onDrop: (event) => {
        const taken = dragged.current;
        if (taken.length === 0) return;
        event.preventDefault();
        end();
        onDropped(taken);
      },
    }),
  };
}
