// The bar that places selected files: a place there is, or unit and temperature typed. It is what a drag does, by the keyboard.
import { useEffect, useId, useRef } from "react";
import { placeValue } from "~/forms/measurement";
import { Button } from "./button";
import { Field, SelectField } from "./form";
import { FormScopeContext } from "./form-state";
import { counted, placeWords, type PlacedFiles } from "./measurement-groups";
import type { Placing } from "./measurement-placing";

interface PlaceFieldsProps {
  /** Id of the form the fields belong to. */
  form: string;
  placed: PlacedFiles;
  serial?: string;
}

/** A place to choose, and the two fields that go before it. */
export function PlaceFields({ form, placed, serial = "" }: PlaceFieldsProps) {
  const lists = useId();
  const places = placed.units.flatMap(({ serial: unit, measurements }) =>
    measurements.map(({ temperature }) => ({
      value: placeValue(unit, temperature),
      label: placeWords({ serial: unit, temperature }),
    })),
  );
  return (
    <>
      <SelectField
        form={form}
        name="place"
        label="Place at"
        options={[{ value: "", label: places.length === 0 ? "a new place" : "a new place, or choose" }, ...places]}
        className="max-tablet:col-span-2"
      />
      <Field form={form} name="placeSerial" label="Unit" defaultValue={serial} list={lists} autoComplete="off" />
      <Field form={form} name="placeTemperature" label="Temperature, °C" inputMode="decimal" autoComplete="off" />
      <datalist id={lists}>
        {placed.units.map((unit) => (
          <option key={unit.serial} value={unit.serial} />
        ))}
      </datalist>
    </>
  );
}

interface PlaceBarProps {
  form: string;
  placed: PlacedFiles;
  placing: Placing;
  /** Of the selected files, those that are still there. */
  selected: readonly string[];
}

/** Stands at the bottom of the window while files are selected, and after they were placed. */
export function PlaceBar({ form, placed, placing, selected }: PlaceBarProps) {
  const { answer, asking } = placing;
  const bar = useRef<HTMLDivElement>(null);
  useEffect(() => {
    if (asking) bar.current?.querySelector<HTMLElement>(`[name="${asking.field}"]`)?.focus();
  }, [asking]);
  if (selected.length === 0) return <LastPlacing placing={placing} />;
  const errors = answer?.errors ?? {};
  return (
    <div
      ref={bar}
      role="group"
      aria-label="Place the selected files"
      onKeyDown={(event) => {
        if (event.key === "Escape") placing.clear();
      }}
      className="sticky bottom-0 z-4 border-t-2 border-ink bg-sheet py-3 print-hidden"
    >
      <p className="pb-2 text-13">
        <b role="status">{counted(selected.length, "file")} selected.</b>{" "}
        <span className="text-quiet">A field left blank stays as each file has it.</span>
        {errors.form ? <span className="block text-fail">{errors.form.join(" ")}</span> : null}
      </p>
      <div className="grid grid-cols-2 items-start gap-3 tablet:grid-cols-[minmax(0,2fr)_minmax(0,1.5fr)_minmax(0,1fr)_auto]">
        <FormScopeContext value={{ values: {}, errors, formId: `${form}-bar`, sending: null }}>
          <PlaceFields key={asking?.serial ?? ""} form={form} placed={placed} serial={asking?.serial ?? ""} />
        </FormScopeContext>
        <div className="flex gap-2 max-tablet:col-span-2 tablet:h-13 tablet:items-center">
          <Button form={form} name="intent" value="place">
            Place {counted(selected.length, "file")}
          </Button>
          <Button type="button" kind="plain" onClick={placing.clear}>
            Cancel
          </Button>
        </div>
      </div>
    </div>
  );
}

/** What was done last, and the way back. */
function LastPlacing({ placing: { answer, undone, undo, redo } }: { placing: Placing }) {
  const back = useRef<HTMLButtonElement>(null);
  const placed = answer?.placed;
  const isUndone = answer?.labelled === true && undone !== null;
  useEffect(() => {
    // The field that was typed in is gone with the bar.
    if (placed && document.activeElement === document.body) back.current?.focus({ preventScroll: true });
  }, [placed]);
  const words = placed
    ? `${counted(placed.length, "file")} placed at ${placeWords(answer.place ?? {})}.`
    : isUndone
      ? `${counted(undone.ids.length, "file")} put back.`
      : (answer?.errors.form ?? []).join(" ");
  return (
    <div
      className={`flex items-center gap-4 text-13 print-hidden ${words === "" ? "" : "sticky bottom-0 z-4 border-t border-edge bg-sheet py-1.5"}`}
    >
      <p role="status">{words}</p>
      {placed ? (
        <Button ref={back} type="button" kind="plain" onClick={undo}>
          Undo
        </Button>
      ) : null}
      {isUndone ? (
        <Button type="button" kind="plain" onClick={redo}>
          Place again
        </Button>
      ) : null}
    </div>
  );
}
