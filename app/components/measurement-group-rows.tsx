// Rows of the measured files in their groups: headings of units, sweeps by temperature, each a place to drop files on.
import type { ComponentProps } from "react";
import { Cell, Row } from "./data-table";
import { counted, placeWords, type MeasuredFile, type MeasurementGroup, type UnitGroup } from "./measurement-groups";
import { FileRow } from "./measurement-row";
import type { ListTools } from "./measurement-tools";
import { useScripted } from "./use-scripted";

/** Of a list that can be edited. */
const COLUMNS = 7;

interface GroupHeadProps {
  title: string;
  note: string;
  files: readonly MeasuredFile[];
  tools: ListTools;
  /** Instead of the note while something is dragged. */
  hint?: string | undefined;
}

/** The heading of a unit, with a box that selects all its files. */
function GroupHead({ title, note, files, tools: { canEdit, placing }, hint }: GroupHeadProps) {
  const isScripted = useScripted();
  const ids = files.map(({ publicId }) => publicId);
  const ticked = ids.filter((id) => placing.selected.has(id)).length;
  const isSome = ticked > 0 && ticked < ids.length;
  return (
    <tr className="data-table-group max-tablet:flex! max-tablet:items-end max-tablet:gap-3">
      {canEdit ? (
        <td>
          <input
            type="checkbox"
            ref={(box) => {
              if (box) box.indeterminate = isSome;
            }}
            checked={ticked === ids.length}
            onChange={(event) => placing.select(ids, event.currentTarget.checked)}
            aria-label={`${title}: select all`}
            className={`size-5 accent-signal ${isScripted ? "" : "invisible"}`}
          />
        </td>
      ) : null}
      <th scope="rowgroup" colSpan={canEdit ? COLUMNS - 1 : COLUMNS - 2}>
        <span className="text-15">{title}</span>
        <span className={`ml-3 text-12 font-normal ${hint ? "text-signal" : "text-quiet"}`}>{hint ?? note}</span>
      </th>
    </tr>
  );
}

export function Unplaced({ files, tools }: { files: readonly MeasuredFile[]; tools: ListTools }) {
  return (
    <tbody>
      <GroupHead
        title="Not placed yet"
        note={`${counted(files.length, "file")} without a unit or a temperature`}
        files={files}
        tools={tools}
      />
      {files.map((file) => (
        <FileRows key={file.publicId} file={file} isUnplaced tools={tools} />
      ))}
    </tbody>
  );
}

const droppable = (isOver: boolean): string =>
  isOver ? "[&_:is(td,th)]:bg-signal/8! outline-2 -outline-offset-2 outline-signal" : "";

export function UnitRows({ unit, tools }: { unit: UnitGroup; tools: ListTools }) {
  const { serial, measurements } = unit;
  const { placing, dragging } = tools;
  const files = measurements.flatMap((measurement) => measurement.files);
  const temperatures = counted(measurements.length, "temperature");
  const { isOver, ...drop } = dragging.target(`unit ${serial}`, (ids) =>
    placing.ask(ids, { field: "placeTemperature", serial }),
  );
  return (
    <>
      <tbody {...drop} className={droppable(isOver)}>
        <GroupHead
          title={`Unit ${serial}`}
          note={`${counted(files.length, "sweep")} at ${temperatures}`}
          files={files}
          tools={tools}
          hint={dragging.ids.length > 0 ? "drop here for a new temperature …" : undefined}
        />
      </tbody>
      {measurements.map((measurement) => (
        <MeasurementRows key={measurement.temperature} serial={serial} measurement={measurement} tools={tools} />
      ))}
    </>
  );
}

interface MeasurementRowsProps {
  serial: string;
  measurement: MeasurementGroup;
  tools: ListTools;
}

function MeasurementRows({ serial, measurement: { temperature, files }, tools }: MeasurementRowsProps) {
  const place = { serial, temperature };
  const { isOver, ...drop } = tools.dragging.target(`${temperature} ${serial}`, (ids) =>
    tools.placing.place(ids, place),
  );
  return (
    <tbody
      {...drop}
      role="rowgroup"
      aria-label={placeWords(place)}
      className={`max-tablet:border-t-0! ${droppable(isOver)}`}
    >
      {files.map((file, index) => (
        <FileRows key={file.publicId} file={file} isFurther={index > 0} tools={tools} />
      ))}
    </tbody>
  );
}

/** A file and, where it is open, its setup. */
function FileRows(props: ComponentProps<typeof FileRow>) {
  const setup = props.tools.renderSetup(props.file);
  return (
    <>
      <FileRow {...props} />
      {setup === null ? null : (
        <Row>
          <Cell colSpan={COLUMNS} className="max-tablet:col-span-2">
            {setup}
          </Cell>
        </Row>
      )}
    </>
  );
}

export function NewUnit({ tools: { placing, dragging } }: { tools: ListTools }) {
  const { isOver, ...drop } = dragging.target("new unit", (ids) =>
    placing.ask(ids, { field: "placeSerial", serial: "" }),
  );
  return (
    <tbody {...drop} className={droppable(isOver)}>
      <tr>
        <td colSpan={COLUMNS} className="text-13 text-signal">
          New unit … drop here, then name it
        </td>
      </tr>
    </tbody>
  );
}
