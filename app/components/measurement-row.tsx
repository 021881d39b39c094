// The row of a measured file: dragged or placed elsewhere, its own setup, taken out of the quote.
import { GripVertical } from "lucide-react";
import { href, useFetcher } from "react-router";
import type { FieldErrors } from "~/forms/form";
import { temperatureText } from "~/forms/measurement";
import { Button, LinkButton } from "./button";
import { Cell, Row, RowHead } from "./data-table";
import { FieldError } from "./field-error";
import { FileNotes, FileVerdict, LabelFields, SweepWords, WorstLine } from "./measurement-cells";
import type { MeasuredFile } from "./measurement-groups";
import type { ListTools } from "./measurement-tools";
import { useScripted } from "./use-scripted";

interface FileRowProps {
  file: MeasuredFile;
  /** It lacks a unit or a temperature, which are typed in its row. */
  isUnplaced?: boolean;
  /** Another file of this unit and temperature stands above it. */
  isFurther?: boolean;
  tools: ListTools;
}

export function FileRow({ file, isUnplaced = false, isFurther = false, tools }: FileRowProps) {
  const { canEdit, placing, dragging, form, errors, scoring, setupOf } = tools;
  const fetcher = useFetcher<{ errors: FieldErrors }>();
  const isSelected = placing.selected.has(file.publicId);
  const isGoing = fetcher.formData?.get("intent") === "remove" || placing.isMoving(file.publicId);
  const isDragged = dragging.ids.includes(file.publicId);
  const remove = () =>
    void fetcher.submit(
      { intent: "remove" },
      { method: "post", action: href("/api/v1/measurements/:measurementId", { measurementId: file.publicId }) },
    );
  return (
    <Row
      id={`file-${file.publicId}`}
      selected={isSelected || setupOf === file.publicId}
      className={isGoing || isDragged ? "opacity-50" : ""}
      draggable={canEdit && !isUnplaced}
      onDragStart={(event) => dragging.start(event, isSelected ? [...placing.selected] : [file.publicId])}
      onDragEnd={dragging.end}
    >
      {canEdit ? <SelectCell file={file} isUnplaced={isUnplaced} tools={tools} /> : null}
      <Cell className="max-tablet:order-2 max-tablet:text-left! tablet:pr-6" data-label="Temperature" figure>
        <span className={isFurther ? "tablet:sr-only" : "font-semibold"}>
          {file.temperature === null ? "–" : `${temperatureText(file.temperature)} °C`}
        </span>
      </Cell>
      <RowHead className="static! max-tablet:order-0 tablet:min-w-44 tablet:py-1.5">
        <a href={href("/files/:fileId", { fileId: file.fileId })} className="break-all">
          {file.fileName}
        </a>
        {isUnplaced && canEdit ? <LabelFields file={file} form={form} errors={errors} /> : null}
        <FileNotes file={file} />
        <FieldError id={`remove-${file.publicId}-error`}>{fetcher.data?.errors.form?.join(" ")}</FieldError>
      </RowHead>
      <Cell figure className="max-tablet:order-3 max-tablet:text-left! tablet:py-1.5" data-label="Sweep">
        <SweepWords file={file} />
      </Cell>
      <Cell className="max-tablet:order-1 max-tablet:justify-self-end tablet:pl-6">
        <FileVerdict file={file} scoring={scoring} />
      </Cell>
      <Cell className="max-tablet:order-4 max-tablet:col-span-2 tablet:py-1.5" data-label="Worst line, margin">
        <WorstLine file={file} />
      </Cell>
      {canEdit ? <Verbs file={file} tools={tools} onRemove={remove} /> : null}
    </Row>
  );
}

function SelectCell({ file, isUnplaced, tools }: Required<Pick<FileRowProps, "file" | "isUnplaced" | "tools">>) {
  const { placing, form } = tools;
  const isScripted = useScripted();
  return (
    <Cell className="w-14 max-tablet:order-6 max-tablet:self-center">
      <span className="flex items-center gap-1">
        <input
          type="checkbox"
          form={form}
          name={`select.${file.publicId}`}
          aria-label={`Select ${file.fileName}`}
          className="size-5 accent-signal"
          checked={placing.selected.has(file.publicId)}
          onChange={(event) => placing.select([file.publicId], event.currentTarget.checked)}
        />
        <span
          aria-hidden
          draggable={isUnplaced}
          title="Drag to a unit and temperature"
          className={`cursor-grab text-edge max-tablet:hidden ${isScripted ? "" : "invisible"}`}
        >
          <GripVertical size={20} strokeWidth={1.75} />
        </span>
      </span>
    </Cell>
  );
}

function Verbs({ file, tools, onRemove }: { file: MeasuredFile; tools: ListTools; onRemove: () => void }) {
  const { placing, form, setupOf } = tools;
  const isScripted = useScripted();
  const isOpen = setupOf === file.publicId;
  return (
    <Cell className="text-right desktop:whitespace-nowrap max-tablet:order-7">
      <Button
        type="button"
        kind="plain"
        aria-label={`Place ${file.fileName}`}
        className={isScripted ? "" : "invisible"}
        onClick={() => placing.ask([file.publicId], { field: "place", serial: "" })}
      >
        Place
      </Button>
      <LinkButton
        kind="plain"
        id={`setup-link-${file.publicId}`}
        to={isOpen ? "?" : `?setup=${file.publicId}#setup-${file.publicId}`}
        preventScrollReset
        aria-expanded={isOpen}
        aria-label={`Setup of ${file.fileName}`}
      >
        Setup
      </LinkButton>
      {/* Without script the form that the list's fields belong to takes the file out. */}
      <Button
        {...(isScripted ? { type: "button", onClick: onRemove } : {})}
        kind="plain"
        form={form}
        name="intent"
        value={`remove:${file.publicId}`}
        aria-label={`Remove ${file.fileName}`}
      >
        Remove
      </Button>
    </Cell>
  );
}
