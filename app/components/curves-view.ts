// What every view of the sheet of curves is given.
import type { ChosenCurves } from "./curves-chosen";

export interface CurvesViewProps<Data> {
  readonly quoteId: string;
  readonly supplierName: string;
  readonly chosen: ChosenCurves;
  /** What came with the page, where it was asked for; else it is fetched. */
  readonly values: Data | undefined;
  /** The table stands open from the start. */
  readonly table: boolean;
}
