// The view of the curves that is asked for.
import type { TraceSeries } from "~/charts/types";
import type { CurvesQuery } from "~/forms/curves";
import type { ChosenCurves } from "./curves-chosen";
import { CurvesDelay, type DelayAnswer } from "./curves-delay";
import { CurvesImpedance, type ImpedanceAnswer } from "./curves-impedance";
import { CurvesMargin, type MarginAnswer } from "./curves-margin";
import { CurvesScales } from "./curves-scales";
import { CurvesSmith, type SmithAnswer } from "./curves-smith";

/** What may come with the page. */
export type CurvesAnswer =
  | { readonly view: "scales"; readonly traces: readonly TraceSeries[] }
  | MarginAnswer
  | SmithAnswer
  | DelayAnswer
  | ImpedanceAnswer;

interface SheetProps {
  quoteId: string;
  supplierName: string;
  query: CurvesQuery;
  chosen: ChosenCurves;
  values: CurvesAnswer | undefined;
}

export function CurvesSheet({ quoteId, supplierName, query, chosen, values }: SheetProps) {
  const { unit, celsius } = chosen.place;
  const shared = { quoteId, supplierName, chosen, table: query.values };
  // Another measurement begins anew: its zoom and readout are its own.
  const key = `${query.view} ${unit} ${celsius} ${query.port}`;
  const of = <View extends CurvesAnswer["view"]>(view: View) =>
    values?.view === view ? (values as Extract<CurvesAnswer, { view: View }>) : undefined;
  switch (query.view) {
    case "scales":
      return <CurvesScales key={key} {...shared} values={of("scales")} />;
    case "margin":
      return <CurvesMargin key={key} {...shared} values={of("margin")} />;
    case "smith":
      return <CurvesSmith key={key} {...shared} values={of("smith")} />;
    case "delay":
      return <CurvesDelay key={key} {...shared} values={of("delay")} />;
    case "impedance":
      return <CurvesImpedance key={key} {...shared} query={query} values={of("impedance")} />;
  }
}
