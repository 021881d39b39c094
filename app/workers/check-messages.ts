// What the upload panel and the worker that checks files say to each other: plain data, which can be posted.
import type { CheckFrame } from "~/rf/check-frame";
import type { Note, StoredCell, StoredResult, Verdict } from "~/rf/index";
import type { LotNote } from "~/rf/lot-notes";
import type { TouchstoneErrorCode } from "~/rf/touchstone-error";

export type CheckRequest =
  | { readonly kind: "open"; readonly frame: CheckFrame }
  | { readonly kind: "check"; readonly id: number; readonly file: File }
  | { readonly kind: "drop"; readonly id: number }
  | { readonly kind: "lot"; readonly ids: readonly number[] };

/** A file that was read and scored by itself. */
export interface CheckedSweep {
  /** Null where neither name nor comments tell it, or where they can be read two ways. */
  readonly serial: string | null;
  /** °C, to a tenth. */
  readonly temperature: number | null;
  readonly points: number;
  /** Hz. */
  readonly sweep: readonly [number, number];
  readonly notes: readonly Note[];
  /** One per measured line, as the server stores them. */
  readonly results: readonly StoredResult[];
  readonly verdict: Verdict;
  /** The line the file stands worst on. */
  readonly worstLineKey: string | null;
}

/** A file that cannot be read, in the server's words. */
export interface CheckRefusal {
  readonly code: TouchstoneErrorCode | "too-large";
  /** 1-based; absent where the fault is the whole file's size. */
  readonly line?: number;
  readonly column?: number;
  readonly sentence: string;
}

export interface CheckedLine {
  readonly lineKey: string;
  readonly verdict: Verdict;
  readonly reason: string | null;
  readonly cells: readonly StoredCell[];
  /** Index into cells, -1 if none. */
  readonly worst: number;
}

/** Files together, as a quote of them would score. */
export interface CheckedLot {
  /** Files in it. */
  readonly ids: readonly number[];
  /** One per measured line. */
  readonly lines: readonly CheckedLine[];
  readonly verdict: Verdict;
  readonly notes: readonly LotNote[];
  /** Those with the same data to the bit count as one. */
  readonly units: number;
  /** Null where the specification gives no range. */
  readonly unitsOverRange: number | null;
}

export type CheckReply =
  | { readonly kind: "ready" }
  | { readonly kind: "scoring"; readonly id: number }
  | { readonly kind: "checked"; readonly id: number; readonly checked: CheckedSweep }
  | { readonly kind: "refused"; readonly id: number; readonly refusal: CheckRefusal }
  /** The disk did not give its bytes: moved, changed or closed to the browser since it was chosen. */
  | { readonly kind: "unread"; readonly id: number }
  | { readonly kind: "lot"; readonly lot: CheckedLot }
  /** A fault of ours. */
  | { readonly kind: "fault"; readonly message: string };
