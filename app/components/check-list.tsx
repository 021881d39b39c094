// Files checked on this machine, not sent yet: how each stands, what was noted, which are refused, and the one button that sends.
import { useId, useState, type ReactNode } from "react";
import { Button } from "./button";
import { CheckLines } from "./check-lines";
import type { CheckFrame } from "~/rf/check-frame";
import { standingOfSweep } from "~/rf/score-sweep";
import type { CheckedSweep } from "~/workers/check-messages";
import { isPending, isSendable, type CheckItem } from "./check-queue";
import { counted, lineFigures, sweepWords, temperatureWords, worstOf } from "./check-words";
import { CoveredVerdict } from "./measurement-cells";
import { TwoLines } from "./data-table";
import { describeDefinition } from "./requirement-words";
import { VerdictMark, verdictColour } from "./verdict-mark";

interface CheckBarProps {
  items: readonly CheckItem[];
  onSend: () => void;
  onCancelRest: () => void;
  onClear: () => void;
}

/** What is going on, and the button that sends. */
export function CheckBar({ items, onSend, onCancelRest, onClear }: CheckBarProps) {
  const pending = items.filter(isPending);
  const sendable = items.filter(isSendable).length;
  return (
    <div className="flex flex-wrap items-center justify-between gap-x-6 gap-y-3 py-4">
      {pending.length > 0 ? <Progress items={items} pending={pending} /> : <Done />}
      <div className="flex items-center gap-2">
        {pending.length > 0 ? (
          <Button type="button" onClick={onCancelRest}>
            Cancel
          </Button>
        ) : (
          <>
            <Button type="button" kind="plain" onClick={onClear}>
              Clear the list
            </Button>
            {sendable > 0 ? (
              <Button type="button" kind="filled" onClick={onSend}>
                Upload {counted(sendable, "file")}
              </Button>
            ) : null}
          </>
        )}
      </div>
    </div>
  );
}

function Done() {
  return (
    <p className="min-w-0 text-13">
      <span className="block font-semibold">Checked on this machine: nothing has been sent.</span>
      <span className="text-quiet">The server scores what you upload again; its figures count.</span>
    </p>
  );
}

function Progress({ items, pending }: { items: readonly CheckItem[]; pending: readonly CheckItem[] }) {
  const done = items.length - pending.length;
  const current = pending.find(({ state }) => state !== "waiting") ?? pending[0];
  const verb = current?.state === "scoring" ? "Scoring" : "Reading";
  return (
    <div className="min-w-0 grow basis-72 text-13">
      <progress
        value={done}
        max={items.length}
        aria-label="Files checked"
        className="block h-1.5 w-full max-w-120 appearance-none bg-rule [&::-moz-progress-bar]:bg-signal [&::-webkit-progress-bar]:bg-rule [&::-webkit-progress-value]:bg-signal"
      />
      <p className="mt-1.5 break-all tabular-nums">
        {verb} {current?.name}, {done + 1} of {items.length}
        <span className="block text-quiet">On this machine: nothing has been sent.</span>
      </p>
    </div>
  );
}

interface CheckListProps {
  items: readonly CheckItem[];
  frame: CheckFrame;
  onRemove: (id: number) => void;
  onRetry: (id: number) => void;
}

export function RefusedFiles({ items, onRemove }: Pick<CheckListProps, "items" | "onRemove">) {
  const refused = items.filter(({ state }) => state === "refused");
  if (refused.length === 0) return null;
  return (
    <ul aria-label="Refused files" className="border-t border-edge">
      {refused.map(({ id, name, sentence }) => (
        <li key={id} className="flex flex-wrap items-center gap-x-5 gap-y-1 border-b border-rule py-1.5 text-13">
          <span className="min-w-0 basis-72 font-semibold break-all">{name}</span>
          <span role="alert" className="flex min-w-0 flex-1 basis-72 items-start gap-2 text-fail">
            <span className="flex h-5 items-center">
              <VerdictMark verdict="fail" silent />
            </span>
            {sentence}
          </span>
          <Button
            type="button"
            kind="plain"
            className="ml-auto"
            onClick={() => onRemove(id)}
            aria-label={`Take ${name} off the list`}
          >
            Dismiss
          </Button>
        </li>
      ))}
    </ul>
  );
}

export function CheckedFiles({ items, frame, onRemove, onRetry }: CheckListProps) {
  const shown = items.filter(isSendable);
  if (shown.length === 0) return null;
  return (
    <ul aria-label="Checked files" className="border-t-[1.5px] border-ink">
      {shown.map((item) => (
        <li key={item.id} className="border-b border-rule text-13">
          {item.checked ? (
            <CheckedRow item={item} checked={item.checked} frame={frame} onRemove={() => onRemove(item.id)} />
          ) : (
            <UncheckedRow item={item} onRemove={() => onRemove(item.id)} onRetry={() => onRetry(item.id)} />
          )}
        </li>
      ))}
    </ul>
  );
}

/** Six columns from 1200 px on; below that the file with its verdict, then what was read of it, then the worst line. */
const ROW =
  "grid grid-cols-[minmax(0,1fr)_auto] items-center gap-x-4 gap-y-1.5 py-2.5 tablet:max-desktop:grid-cols-[minmax(0,5fr)_minmax(0,3fr)_130px] desktop:gap-x-6 desktop:py-1.5 desktop:grid-cols-[minmax(0,24fr)_minmax(0,11fr)_minmax(0,27fr)_minmax(0,12fr)_132px_188px]";

interface CheckedRowProps {
  item: CheckItem;
  checked: CheckedSweep;
  frame: CheckFrame;
  onRemove: () => void;
}

function CheckedRow({ item, checked, frame, onRemove }: CheckedRowProps) {
  const [isOpen, setIsOpen] = useState(false);
  const id = useId();
  const { name } = item;
  const standing = standingOfSweep(checked.results);
  return (
    <>
      <div className={ROW}>
        <div className="min-w-0">
          <span className="block font-semibold break-all">{name}</span>
          <span className="block text-12 text-quiet">{sweepWords(checked.points, checked.sweep)}</span>
          <Notes checked={checked} />
        </div>
        <span className="justify-self-end max-tablet:self-start tablet:max-desktop:col-start-3 tablet:max-desktop:row-start-1 desktop:order-5 desktop:justify-self-start">
          <CoveredVerdict verdict={standing.verdict} coverage={{ lines: standing.linesCovered, of: standing.lines }} />
        </span>
        <Labels checked={checked} />
        <WorstLine checked={checked} frame={frame} verdict={standing.verdict} />
        <span className="-ml-2 flex items-center gap-1 max-desktop:col-span-full desktop:order-6 desktop:ml-0 desktop:justify-end">
          <Button
            type="button"
            kind="plain"
            aria-expanded={isOpen}
            aria-controls={isOpen ? id : undefined}
            aria-label={`All lines of ${name}`}
            onClick={() => setIsOpen(!isOpen)}
          >
            {isOpen ? "Hide lines" : `All ${counted(frame.lines.length, "line")}`}
          </Button>
          <Button type="button" kind="plain" onClick={onRemove} aria-label={`Remove ${name}`}>
            Remove
          </Button>
        </span>
      </div>
      {isOpen ? <CheckLines id={id} fileName={name} checked={checked} frame={frame} /> : null}
    </>
  );
}

function Labels({ checked: { serial, temperature } }: { checked: CheckedSweep }) {
  const missing = (isMissing: boolean) => (isMissing ? "text-bare" : "");
  return (
    <TwoLineCell
      className="max-tablet:col-span-full tablet:max-desktop:col-start-2 tablet:max-desktop:row-start-1"
      upper={<span className={missing(serial === null)}>{serial ?? "no unit read"}</span>}
      lower={<span className={missing(temperature === null)}>{temperatureWords(temperature)}</span>}
    />
  );
}

interface WorstLineProps {
  checked: CheckedSweep;
  frame: CheckFrame;
  /** Of the file, for the colour. */
  verdict: CheckedSweep["verdict"];
}

function WorstLine({ checked, frame, verdict }: WorstLineProps) {
  const worst = worstOf(checked, frame);
  if (!worst) return null;
  const { requirement, limit } = describeDefinition(worst.line.definition, frame.lowestTestFrequency);
  const { value, margin, place } = lineFigures(worst.line, worst.result);
  const colour = verdict === "pass" ? "" : `font-semibold ${verdictColour(verdict)}`;
  return (
    <>
      <TwoLineCell
        className="tablet:max-desktop:col-span-2"
        upper={
          <>
            <span className="font-semibold">{worst.line.lineNumber}</span>
            {` ${requirement}: `}
            <span className="whitespace-nowrap tabular-nums">{value === "–" ? "not reached" : value}</span>
          </>
        }
        lower={`limit ${limit}`}
      />
      <TwoLineCell
        className="max-tablet:text-right"
        upper={<span className={`whitespace-nowrap tabular-nums ${colour}`}>{margin}</span>}
        lower={<span className="tabular-nums">{place}</span>}
      />
    </>
  );
}

interface TwoLineCellProps {
  upper: ReactNode;
  lower: ReactNode;
  className: string;
}

const TwoLineCell = ({ upper, lower, className }: TwoLineCellProps) => (
  <span className={`min-w-0 ${className}`}>
    <TwoLines upper={upper} lower={lower} />
  </span>
);

function Notes({ checked: { notes } }: { checked: CheckedSweep }) {
  if (notes.length === 0) return null;
  return (
    <details className="text-12 text-quiet">
      <summary className="inline-block min-h-6 py-1">{counted(notes.length, "note")}</summary>
      <ul className="max-w-110 pb-1">
        {notes.map(({ message }, index) => (
          <li key={index}>{message}</li>
        ))}
      </ul>
    </details>
  );
}

/** Not refused, and not checked: it can be tried again, or sent as it is. */
function UncheckedRow({ item, onRemove, onRetry }: { item: CheckItem; onRemove: () => void; onRetry: () => void }) {
  const { name, sentence } = item;
  return (
    <div className="flex flex-wrap items-center gap-x-5 gap-y-1 py-1.5">
      <span className="min-w-0 basis-72 font-semibold break-all">{name}</span>
      <span role="status" className="flex min-w-0 flex-1 basis-72 items-start gap-2 text-bare">
        <span className="flex h-5 items-center">
          <VerdictMark verdict="not-covered" silent />
        </span>
        {sentence}
      </span>
      <span className="ml-auto flex items-center gap-1">
        <Button type="button" kind="plain" onClick={onRetry} aria-label={`Check ${name} again`}>
          Check again
        </Button>
        <Button type="button" kind="plain" onClick={onRemove} aria-label={`Remove ${name}`}>
          Remove
        </Button>
      </span>
    </div>
  );
}
