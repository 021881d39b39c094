// The measured files of a quote under unit and temperature: placed by dragging or by the keyboard, each with verdict and setup.
import { useEffect, useId, useRef } from "react";
import { Form } from "react-router";
import type { FieldErrors, FormState } from "~/forms/form";
import { Button } from "./button";
import { HeadCell, Table } from "./data-table";
import { useDragging } from "./measurement-dragging";
import { NewUnit, UnitRows, Unplaced } from "./measurement-group-rows";
import { groupMeasurements, type MeasuredFile } from "./measurement-groups";
import { PlaceBar, PlaceFields } from "./measurement-place-bar";
import { usePlacing, type Placing } from "./measurement-placing";
import { SweepSetup, type SweepSetupContext } from "./measurement-setup";
import type { ListTools } from "./measurement-tools";

interface MeasurementListProps {
  entries: readonly MeasuredFile[];
  scoring: "done" | "pending" | "failed";
  canEdit: boolean;
  /** Of a post without script, by `serial.<id>` and `temperature.<id>`. */
  errors?: FieldErrors | undefined;
  /** What a sweep's own setup stands beside; absent where nothing can be edited. */
  setups?: SweepSetupContext;
  /** The sweep whose setup is open, and what the action sent back of it. */
  setupOf?: string | null;
  setupState?: FormState | undefined;
}

export function MeasurementList(props: MeasurementListProps) {
  const { entries, scoring, canEdit, errors = {}, setups, setupOf = null, setupState } = props;
  const form = useId();
  const placing = usePlacing();
  const dragging = useDragging();
  useFocusBack(setupOf);
  const placed = groupMeasurements(entries);
  const renderSetup = (file: MeasuredFile) =>
    setups && setupOf === file.publicId ? (
      <SweepSetup {...setups} key={file.publicId} file={file} files={entries} state={setupState} />
    ) : null;
  const tools: ListTools = { canEdit, placing, dragging, form, errors, scoring, setupOf, renderSetup };
  const selected = entries.flatMap(({ publicId }) => (placing.selected.has(publicId) ? [publicId] : []));
  return (
    // What has the focus is not to lie under the bar at the bottom.
    <div className="[&_:is(a,button,input,summary)]:scroll-mb-36">
      {canEdit ? <ListForm id={form} placing={placing} /> : null}
      <Table label="Measured files" rows="two-line" stacks>
        <Head canEdit={canEdit} />
        {placed.unplaced.length > 0 ? <Unplaced files={placed.unplaced} tools={tools} /> : null}
        {placed.units.map((unit) => (
          <UnitRows key={unit.serial} unit={unit} tools={tools} />
        ))}
        {canEdit && dragging.ids.length > 0 ? <NewUnit tools={tools} /> : null}
      </Table>
      {canEdit ? (
        <>
          <noscript>
            <div className="mt-4 grid grid-cols-2 items-start gap-3 tablet:grid-cols-4">
              <PlaceFields form={form} placed={placed} />
              <Button form={form} name="intent" value="place">
                Place the ticked files
              </Button>
            </div>
          </noscript>
          <PlaceBar form={form} placed={placed} placing={placing} selected={selected} />
        </>
      ) : null}
    </div>
  );
}

/** Puts the focus back to the link that opened a sweep's setup once it is closed. */
function useFocusBack(setupOf: string | null): void {
  const before = useRef(setupOf);
  useEffect(() => {
    if (before.current !== null && setupOf === null)
      document.getElementById(`setup-link-${before.current}`)?.focus({ preventScroll: true });
    before.current = setupOf;
  }, [setupOf]);
}

/** Fields and buttons of the list belong to it by its id, for a sweep's setup is a form of its own between them. */
function ListForm({ id, placing }: { id: string; placing: Placing }) {
  return (
    <Form
      id={id}
      method="post"
      aria-label="Units and temperatures"
      onSubmit={(event) => {
        event.preventDefault();
        const { submitter } = event.nativeEvent as SubmitEvent;
        placing.send(new FormData(event.currentTarget, submitter));
      }}
    >
      {/* What Enter presses in a field: never a Remove. */}
      <button name="intent" value={placing.selected.size > 0 ? "place" : "labels"} hidden tabIndex={-1} />
      <noscript>
        <Button name="intent" value="labels" className="mb-3">
          Save units and temperatures
        </Button>
      </noscript>
    </Form>
  );
}

function Head({ canEdit }: { canEdit: boolean }) {
  return (
    <thead>
      <tr>
        {canEdit ? (
          <HeadCell>
            <span className="sr-only">Select</span>
          </HeadCell>
        ) : null}
        <HeadCell figure className="w-26 tablet:pr-6!">
          Temperature
        </HeadCell>
        <HeadCell>File</HeadCell>
        <HeadCell figure>Sweep, points and step</HeadCell>
        <HeadCell className="pl-6">Verdict of this file</HeadCell>
        <HeadCell>Worst line, margin</HeadCell>
        {canEdit ? (
          <HeadCell>
            <span className="sr-only">Place, setup, remove</span>
          </HeadCell>
        ) : null}
      </tr>
    </thead>
  );
}
