// Where measured files are dropped or chosen, and what is still on its way. Without script the same form posts them all.
import { Upload } from "lucide-react";
import { useEffect, useId, useRef, useState, useSyncExternalStore, type DragEvent } from "react";
import { Button } from "./button";
import { PostForm } from "./form";
import { formatNumber } from "./format";
import { UploadQueue, sendTo, type UploadItem } from "./upload-queue";
import { VerdictMark } from "./verdict-mark";

interface UploadPanelProps {
  /** Takes one file a post. */
  address: string;
  /** Told after each stored file. */
  onStored: () => void;
}

export function UploadPanel({ address, onStored }: UploadPanelProps) {
  const [queue] = useState(() => new UploadQueue(sendTo(address), onStored));
  const items = useSyncExternalStore(queue.subscribe, queue.items, queue.items);
  useLeaveGuard(items.some(({ state }) => state !== "refused"));
  return (
    <div>
      <DropZone onFiles={(files) => queue.add(files)} />
      <p role="status" className="sr-only">
        {statusWords(items)}
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
    </div>
  );
}

function statusWords(items: readonly UploadItem[]): string {
  const refused = items.filter(({ state }) => state === "refused").length;
  const under = items.length - refused;
  return [under > 0 ? `${under} files on their way` : "", refused > 0 ? `${refused} files refused` : ""]
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

function DropZone({ onFiles }: { onFiles: (files: readonly File[]) => void }) {
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
        <div className="min-w-0 grow">
          <label htmlFor={`${hint}-file`} className="block font-semibold">
            Drop two-port Touchstone files here, or choose them
          </label>
          <p id={hint} className="text-13 text-quiet">
            S2P or version 2 files, at most 64 MiB each and 200 in all. Serial and temperature are read from name or
            comments where they stand there.
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
