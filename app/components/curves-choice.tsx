// Choosing what to look at on the sheet of curves: view by links, unit and temperature by a form that needs no script.
import { useRef } from "react";
import { Form, Link, useSubmit } from "react-router";
import { CURVE_VIEWS, curvesSearch, type CurvesQuery, type CurveView } from "~/forms/curves";
import { Button } from "./button";
import { celsiusWords, type ComplianceColumns } from "./compliance-words";
import { measuredTemperatures, type CurvesPlace } from "./curves-chosen";
import { SelectField } from "./field";

const VIEW_NAMES: Record<CurveView, string> = {
  scales: "Two scales",
  margin: "Margin",
  smith: "Smith chart",
  delay: "Group delay",
  impedance: "Impedance",
};

interface ChoiceProps {
  /** What is shown, by name: links lead to its other views. */
  query: CurvesQuery;
  units: readonly ComplianceColumns[];
  place: CurvesPlace;
}

export function CurvesChoice({ query, units, place }: ChoiceProps) {
  return (
    <div className="mt-6 flex flex-wrap items-end justify-between gap-x-8 gap-y-4 print-hidden">
      <PlaceForm query={query} units={units} place={place} />
      <ViewLinks query={query} />
    </div>
  );
}

function ViewLinks({ query }: { query: CurvesQuery }) {
  return (
    <nav aria-label="Views of the curves">
      <ul className="flex flex-wrap gap-x-6 text-13 max-tablet:gap-x-4">
        {CURVE_VIEWS.map((view) => (
          <li key={view}>
            <Link
              to={curvesSearch({ ...query, view }) || "?"}
              preventScrollReset
              aria-current={view === query.view ? "true" : undefined}
              className="block border-b-2 border-transparent py-2 text-quiet no-underline hover:text-ink aria-[current=true]:border-signal aria-[current=true]:font-semibold aria-[current=true]:text-ink"
            >
              {VIEW_NAMES[view]}
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  );
}

function PlaceForm({ query, units, place }: ChoiceProps) {
  const form = useRef<HTMLFormElement>(null);
  const submit = useSubmit();
  const show = () => void submit(form.current, { preventScrollReset: true });
  const column = units.find(({ unit }) => unit === place.unit);
  return (
    <Form
      ref={form}
      method="get"
      preventScrollReset
      // Other choices come from links: the fields follow them.
      key={`${place.unit} ${place.celsius}`}
      className="flex flex-wrap items-end gap-3"
    >
      <input type="hidden" name="view" value={query.view} />
      {query.line === null ? null : <input type="hidden" name="line" value={query.line} />}
      {query.port === 2 ? <input type="hidden" name="port" value="2" /> : null}
      {query.values ? <input type="hidden" name="values" value="1" /> : null}
      <SelectField
        name="unit"
        label="Unit"
        className="w-52 max-tablet:w-48"
        defaultValue={place.unit}
        onChange={show}
        options={units
          .filter((one) => measuredTemperatures(one).length > 0)
          .map(({ unit }) => ({ value: unit, label: unit }))}
      />
      <SelectField
        name="temperature"
        label="Temperature"
        className="w-36 max-tablet:w-34"
        defaultValue={String(place.celsius)}
        onChange={show}
        options={measuredTemperatures(column).map((celsius) => ({
          value: String(celsius),
          label: celsiusWords(celsius),
        }))}
      />
      <noscript>
        <Button>Show</Button>
      </noscript>
    </Form>
  );
}
