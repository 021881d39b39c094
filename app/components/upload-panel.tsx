// Where measured files are dropped or chosen: checked on this machine first, sent when asked. Without script the form posts them all.
import { Upload } from "lucide-react";
import { useEffect, useEffectEvent, useId, useRef, useState, useSyncExternalStore, type DragEvent } from "react";
import { Button } from "./button";
import { CheckBar, CheckedFiles, RefusedFiles } from "./check-list";
import { CheckLot } from "./check-lot";
import type { CheckFrame } from "~/rf/check-frame";
import { CheckQueue, isPending, startCheckWorker, type CheckState } from "./check-queue";
import { counted } from "./check-words";
import { PostForm } from "./form";
import { formatNumber } from "./format";
import { UploadQueue, sendTo, type UploadItem } from "./upload-queue";
import { VerdictMark } from "./verdict-mark";

interface UploadPanelProps {
  /** Takes one file a post. */
  address: string;
  /** What dropped files are checked against. */
  frame: CheckFrame;
  /** Told after each stored file. */
  onStored: () => void;
}

export function UploadPanel({ address, frame, onStored }: UploadPanelProps) {
  const [queue] = useState(() => new UploadQueue(sendTo(address), onStored));
  const items = useSyncExternalStore(queue.subscribe, queue.items, queue.items);
  const [checks, state] = useCheckQueue(frame);
  useLeaveGuard(items.some(({ state: at }) => at !== "refused"));
  const take = (files: readonly File[]) => (state.canCheck ? checks.add(files) : queue.add(files));
  return (
    <div>
      <DropZone onFiles={take} canCheck={state.canCheck} />
      <p role="status" className="sr-only">
        {[checkWords(state), statusWords(items)].filter(Boolean).join(" ")}
      </p>
      {items.length === 0 ? null : (
        <ul aria-label="Files on their way" className="mt-3 border-t border-edge">
          {items.map((item) => (
            <QueueRow
              key={item.id}
              item={item}
              onCancel={() => queue.cancel(item.id)}
              onRetry={() => queue.retry(item.id)}
            />
          ))}
        </ul>
      )}
      {state.items.length === 0 ? null : (
        <>
          <CheckBar
            items={state.items}
            onSend={() => queue.add(checks.take())}
            onCancelRest={() => checks.cancelRest()}
            onClear={() => checks.clear()}
          />
          <RefusedFiles items={state.items} onRemove={(id) => checks.remove(id)} />
          <CheckedFiles
            items={state.items}
            frame={frame}
            onRemove={(id) => checks.remove(id)}
            onRetry={(id) => checks.retry(id)}
          />
          <CheckLot state={state} frame={frame} />
        </>
      )}
    </div>
  );
}

/** The worker runs from the first moment, so that what is dropped needs no request, and is ended with the page. */
function useCheckQueue(frame: CheckFrame): readonly [CheckQueue, CheckState] {
  const [queue] = useState(() => new CheckQueue(startCheckWorker));
  useEffect(() => queue.open(frame), [queue, frame]);
  useEffect(() => () => queue.close(), [queue]);
  useEffect(loadFonts, []);
  return [queue, useSyncExternalStore(queue.subscribe, queue.state, queue.state)];
}

/** Greek letters have a font file of their own, and a note with the first Ω would ask for it after files were dropped. */
function loadFonts(): void {
  const family = getComputedStyle(document.body).fontFamily;
  document.fonts.load(`13px ${family}`, "aΩ").catch(() => undefined);
}

/** For those who hear the page; said once all are checked. */
function checkWords({ items }: CheckState): string {
  if (items.length === 0 || items.some(isPending)) return "";
  const refused = items.filter(({ state }) => state === "refused").length;
  const checked = counted(items.length - refused, "file");
  return `${checked} checked on this machine${refused > 0 ? `, ${refused} refused` : ""}; nothing has been sent.`;
}

function statusWords(items: readonly UploadItem[]): string {
  const refused = items.filter(({ state }) => state === "refused").length;
  const under = items.length - refused;
  return [
    under > 0 ? `${counted(under, "file")} on their way` : "",
    refused > 0 ? `${counted(refused, "file")} refused` : "",
  ]
    .filter(Boolean)
    .join(", ");
}

/** Asks before the tab is closed on a transfer. */
function useLeaveGuard(isBusy: boolean): void {
  useEffect(() => {
    if (!isBusy) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", ask);
    return () => window.removeEventListener("beforeunload", ask);
  }, [isBusy]);
}

interface DropZoneProps {
  onFiles: (files: readonly File[]) => void;
  canCheck: boolean;
}

function DropZone({ onFiles, canCheck }: DropZoneProps) {
  const input = useRef<HTMLInputElement>(null);
  const [isOver, setIsOver] = useState(false);
  const hint = useId();
  const take = (event: DragEvent) => {
    event.preventDefault();
    setIsOver(false);
    onFiles([...event.dataTransfer.files]);
  };
  const choose = () => {
    const { files } = input.current ?? {};
    if (!files?.length) return;
    onFiles([...files]);
    if (input.current) input.current.value = "";
  };
  // Files chosen before the script ran.
  const chooseEarly = useEffectEvent(choose);
  useEffect(() => chooseEarly(), []);
  return (
    <PostForm upload aria-label="Upload measured files">
      <div
        onDragOver={(event) => {
          event.preventDefault();
          setIsOver(true);
        }}
        onDragLeave={() => setIsOver(false)}
        onDrop={take}
        className={`flex flex-wrap items-center gap-x-6 gap-y-3 border border-dashed px-6 py-5 ${isOver ? "border-signal bg-signal/8" : "border-edge"}`}
      >
        <Upload size={20} strokeWidth={1.75} aria-hidden className="text-quiet" />
        <div className="min-w-0 flex-1 basis-90">
          <label htmlFor={`${hint}-file`} className="block font-semibold">
            Drop two-port Touchstone files here, or choose them
          </label>
          <p id={hint} className="text-13 text-quiet">
            S2P or version 2 files, at most 64 MiB each and 200 in all. Serial and temperature are read from name or
            comments where they stand there.{" "}
            <span className="noscript:hidden">
              {canCheck
                ? "They are checked on this machine first; nothing is sent before you press Upload."
                : "This browser cannot check files by itself: what you choose is sent at once, and scored by the server."}
            </span>
          </p>
        </div>
        <input
          ref={input}
          id={`${hint}-file`}
          type="file"
          name="file"
          multiple
          aria-describedby={hint}
          onChange={choose}
          className="max-w-full min-w-0 text-13 file:mr-3 file:min-h-9 file:cursor-pointer file:rounded-field file:border file:border-solid file:border-edge file:bg-transparent file:px-4 file:text-13 file:font-semibold file:text-ink pointer-coarse:file:min-h-11"
        />
        <noscript>
          <Button kind="filled" name="intent" value="upload">
            Upload
          </Button>
        </noscript>
      </div>
    </PostForm>
  );
}

const mebibytes = (bytes: number): string => `${formatNumber(bytes / 1024 / 1024, 1)} MiB`;

interface QueueRowProps {
  item: UploadItem;
  onCancel: () => void;
  onRetry: () => void;
}

function QueueRow({ item, onCancel, onRetry }: QueueRowProps) {
  const isRefused = item.state === "refused";
  return (
    <li className="flex flex-wrap items-center gap-x-5 gap-y-1 border-b border-rule py-1.5 text-13">
      <span className="min-w-0 basis-72 font-semibold break-all">{item.name}</span>
      {isRefused ? (
        <span role="alert" className="flex min-w-0 flex-1 basis-72 items-start gap-2 text-fail">
          <span className="flex h-5 items-center">
            <VerdictMark verdict="fail" silent />
          </span>
          {item.error}
        </span>
      ) : (
        <span className="flex min-w-0 flex-1 basis-72 items-center gap-3 text-quiet">
          <progress
            value={item.progress}
            max={1}
            aria-label={`${item.name}, share sent`}
            className="h-1.5 w-40 appearance-none bg-rule [&::-moz-progress-bar]:bg-signal [&::-webkit-progress-bar]:bg-rule [&::-webkit-progress-value]:bg-signal"
          />
          <span className="tabular-nums">{stateWords(item)}</span>
        </span>
      )}
      <span className="ml-auto flex items-center gap-1">
        {item.canRetry ? (
          <Button type="button" kind="plain" onClick={onRetry} aria-label={`Send ${item.name} again`}>
            Send again
          </Button>
        ) : null}
        <Button
          type="button"
          kind="plain"
          onClick={onCancel}
          aria-label={isRefused ? `Take ${item.name} off the list` : `Cancel ${item.name}`}
        >
          {isRefused ? "Dismiss" : "Cancel"}
        </Button>
      </span>
    </li>
  );
}

function stateWords({ state, progress, size }: UploadItem): string {
  if (state === "waiting") return "waits";
  if (state === "checking") return "read and scored";
  return `${Math.floor(progress * 100)} % of ${mebibytes(size)}`;
}
