// Files checked on this machine before any is sent: one at a time in a worker that is ended when one takes too long, then all together.
import type { CheckFrame } from "~/rf/check-frame";
import type { CheckedLot, CheckedSweep, CheckReply, CheckRequest } from "~/workers/check-messages";
import { MOST_BYTES, TOO_LARGE } from "./upload-queue";

export interface CheckItem {
  readonly id: number;
  readonly name: string;
  /** Bytes. */
  readonly size: number;
  /** "unchecked": it was not refused, but could not be checked here. */
  readonly state: "waiting" | "reading" | "scoring" | "checked" | "refused" | "unchecked";
  /** Of a checked one. */
  readonly checked?: CheckedSweep;
  /** Why it was refused or not checked. */
  readonly sentence?: string;
}

export interface CheckState {
  readonly items: readonly CheckItem[];
  /** The checked files together; null while there is none, or not yet. */
  readonly lot: CheckedLot | null;
  /** Why they are not scored together, in a sentence. */
  readonly lotRefusal: string | null;
  readonly isScoringLot: boolean;
  /** False where no worker runs: files are sent as they are. */
  readonly canCheck: boolean;
}

/** A worker that was started. */
export interface CheckWorker {
  readonly post: (request: CheckRequest) => void;
  /** At once, whatever it is at. */
  readonly end: () => void;
}

/**
 * Starts a worker; null where this browser has none.
 * @param onBroken it could not be loaded, or died
 */
export type StartCheckWorker = (onReply: (reply: CheckReply) => void, onBroken: () => void) => CheckWorker | null;

const MOST_START_MS = 20_000;
const MOST_FILE_MS = 20_000;
/** Of all files together, besides what each adds. */
const MOST_LOT_MS = 20_000;
const MOST_LOT_MS_A_FILE = 2_000;

const TOOK_TOO_LONG = "The check took longer than 20 s here and was stopped. The server can still score it.";
const NOT_READ = "This file could not be read from the disk. Choose it again.";
const NOT_STARTED = "The check could not be started here. The server can still score it.";
const BROKEN = "The check broke off here. The server can still score it.";
const LOT_TOOK_TOO_LONG = "Scoring all files together took too long here and was stopped. The server scores them.";
const LOT_BROKEN = "Scoring all files together broke off here. The server scores them.";

interface Entry {
  item: CheckItem;
  readonly file: File;
}

type Task = { readonly kind: "check"; readonly id: number } | { readonly kind: "lot" };

const NOTHING: CheckState = { items: [], lot: null, lotRefusal: null, isScoringLot: false, canCheck: true };

export class CheckQueue {
  readonly #start: StartCheckWorker;
  readonly #listeners = new Set<() => void>();
  #state = NOTHING;
  #frame: CheckFrame | null = null;
  #entries: Entry[] = [];
  #nextId = 1;
  #worker: CheckWorker | null = null;
  #isReady = false;
  /** Files wait for a worker that has not reported yet. */
  #isAwaited = false;
  #task: Task | null = null;
  #timer: ReturnType<typeof setTimeout> | undefined;
  /** Files whose networks the worker that runs now holds. */
  #held = new Set<number>();
  #lot: CheckedLot | null = null;
  #lotRefusal: string | null = null;
  #isLotStale = false;
  #canCheck = true;

  constructor(start: StartCheckWorker) {
    this.#start = start;
  }

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  };

  /** The same object until something changes. */
  readonly state = (): CheckState => this.#state;

  /** Starts the worker, before any file is there: what comes later needs no request. With another frame all files are checked again. */
  open(frame: CheckFrame): void {
    const isSame = this.#frame !== null && JSON.stringify(frame) === JSON.stringify(this.#frame);
    if (isSame && this.#worker) return;
    this.#frame = frame;
    if (!isSame) for (const entry of this.#entries) if (entry.item.state !== "refused") this.#set(entry, "waiting");
    this.#restart();
    this.#advance();
  }

  /** Ends the worker, whatever it is at. */
  close(): void {
    this.#endWorker();
  }

  add(files: readonly File[]): void {
    for (const file of files) {
      const entry: Entry = { file, item: { id: this.#nextId, name: file.name, size: file.size, state: "waiting" } };
      this.#nextId += 1;
      this.#entries.push(entry);
      if (file.size > MOST_BYTES) this.#set(entry, "refused", { sentence: TOO_LARGE });
    }
    this.#advance();
  }

  remove(id: number): void {
    this.#forget([id]);
    this.#advance();
  }

  clear(): void {
    this.#forget(this.#entries.map(({ item }) => item.id));
    this.#advance();
  }

  /** Takes those off the list that are not checked yet. */
  cancelRest(): void {
    this.#forget(this.#entries.flatMap(({ item }) => (isPending(item) ? [item.id] : [])));
    this.#advance();
  }

  /** Checks one again that could not be checked. */
  retry(id: number): void {
    const entry = this.#entry(id);
    if (entry?.item.state === "unchecked") this.#set(entry, "waiting");
    this.#advance();
  }

  /** The files to be sent, all but the refused ones; they leave the list. */
  take(): File[] {
    const taken = this.#entries.filter(({ item }) => isSendable(item));
    this.#forget(taken.map(({ item }) => item.id));
    this.#advance();
    return taken.map(({ file }) => file);
  }

  #entry(id: number): Entry | undefined {
    return this.#entries.find(({ item }) => item.id === id);
  }

  #set(entry: Entry, state: CheckItem["state"], found: Pick<CheckItem, "checked" | "sentence"> = {}): void {
    const { id, name, size } = entry.item;
    if (entry.item.state === "checked" || state === "checked") this.#isLotStale = true;
    entry.item = { id, name, size, state, ...found };
  }

  #forget(ids: readonly number[]): void {
    const task = this.#task;
    const changesLot = ids.some((id) => this.#entry(id)?.item.state === "checked");
    if (changesLot) this.#isLotStale = true;
    this.#entries = this.#entries.filter(({ item }) => !ids.includes(item.id));
    const isAtOne = task !== null && (task.kind === "lot" ? changesLot : ids.includes(task.id));
    // A worker that computes hears nothing: it is replaced, and what it held is read again when it is needed.
    if (isAtOne) this.#restart();
    else for (const id of ids) if (this.#held.delete(id)) this.#worker?.post({ kind: "drop", id });
  }

  #restart(): void {
    this.#endWorker();
    const frame = this.#frame;
    if (!frame) return;
    const isCurrent = (): boolean => this.#worker === worker;
    const worker = this.#start(
      (reply) => isCurrent() && this.#hear(reply),
      () => isCurrent() && this.#giveUp(),
    );
    this.#worker = worker;
    if (worker) worker.post({ kind: "open", frame });
    else this.#giveUp();
  }

  #endWorker(): void {
    clearTimeout(this.#timer);
    this.#worker?.end();
    this.#worker = null;
    this.#isReady = false;
    this.#isAwaited = false;
    this.#held.clear();
    const current = this.#task?.kind === "check" ? this.#entry(this.#task.id) : undefined;
    if (current && isPending(current.item)) this.#set(current, "waiting");
    this.#task = null;
  }

  #hear(reply: CheckReply): void {
    if (reply.kind === "ready") this.#becomeReady();
    else if (reply.kind === "scoring") this.#showScoring(reply.id);
    else this.#end(reply);
    this.#advance();
  }

  #becomeReady(): void {
    clearTimeout(this.#timer);
    this.#isReady = true;
    // One that was given up before may come when the page opens the queue again.
    this.#canCheck = true;
  }

  #showScoring(id: number): void {
    const entry = this.#entry(id);
    if (entry?.item.state === "reading") this.#set(entry, "scoring");
  }

  /** Ends the task with what the worker found. */
  #end(reply: Exclude<CheckReply, { kind: "ready" | "scoring" }>): void {
    clearTimeout(this.#timer);
    const task = this.#task;
    this.#task = null;
    if (reply.kind === "fault") this.#failTask(task, BROKEN, LOT_BROKEN);
    else if (reply.kind === "lot") [this.#lot, this.#lotRefusal, this.#isLotStale] = [reply.lot, null, false];
    else this.#endCheck(reply);
  }

  #endCheck(reply: Extract<CheckReply, { kind: "checked" | "refused" | "unread" }>): void {
    const entry = this.#entry(reply.id);
    if (!entry) return;
    if (reply.kind === "refused") this.#set(entry, "refused", { sentence: reply.refusal.sentence });
    else if (reply.kind === "unread") this.#set(entry, "refused", { sentence: NOT_READ });
    // One that was only read again for the lot stays as it is.
    else if (entry.item.state !== "checked") this.#set(entry, "checked", { checked: reply.checked });
    if (reply.kind === "checked") this.#hold(entry);
  }

  /** The worker keeps what a lot can be made of, and no more: what else it read would fill the memory of this machine. */
  #hold({ item: { id, checked } }: Entry): void {
    const isFull = this.#frame !== null && tooManyPoints(this.#entries, this.#frame.mostPoints) !== null;
    if (checked && isPlaced(checked) && !isFull) this.#held.add(id);
    else this.#worker?.post({ kind: "drop", id });
  }

  #failTask(task: Task | null, fileSentence: string, lotSentence: string): void {
    const entry = task?.kind === "check" ? this.#entry(task.id) : undefined;
    if (entry) this.#set(entry, "unchecked", { sentence: fileSentence });
    if (task?.kind === "lot") [this.#lot, this.#lotRefusal, this.#isLotStale] = [null, lotSentence, false];
  }

  #stopTask(): void {
    const task = this.#task;
    this.#restart();
    this.#failTask(task, TOOK_TOO_LONG, LOT_TOOK_TOO_LONG);
    this.#advance();
  }

  /** No worker can be had any more: what waits goes to the server unchecked. */
  #giveUp(): void {
    const sentence = this.#isReady ? BROKEN : NOT_STARTED;
    this.#endWorker();
    this.#canCheck = false;
    for (const entry of this.#entries) if (isPending(entry.item)) this.#set(entry, "unchecked", { sentence });
    this.#advance();
  }

  #advance(): void {
    if (this.#worker && this.#isReady && this.#task === null) this.#beginNext();
    else if (this.#worker && !this.#isReady) this.#awaitWorker();
    this.#publish();
  }

  /** A worker that does not come while files wait for it is not waited for without end. */
  #awaitWorker(): void {
    const isAwaited = this.#entries.some(({ item }) => item.state === "waiting");
    if (!isAwaited) clearTimeout(this.#timer);
    else if (!this.#isAwaited) this.#timer = setTimeout(() => this.#giveUp(), MOST_START_MS);
    this.#isAwaited = isAwaited;
  }

  #beginNext(): void {
    const waiting = this.#entries.find(({ item }) => item.state === "waiting");
    if (waiting) this.#beginCheck(waiting);
    else if (this.#isLotStale) this.#beginLot();
  }

  #beginCheck(entry: Entry): void {
    const { file, item } = entry;
    if (item.state === "waiting") this.#set(entry, "reading");
    this.#begin({ kind: "check", id: item.id }, { kind: "check", id: item.id, file }, MOST_FILE_MS);
  }

  /** Scores all together, once the worker holds them all. */
  #beginLot(): void {
    const entries = this.#entries.filter(({ item }) => item.checked && isPlaced(item.checked));
    this.#lotRefusal = this.#frame && tooManyPoints(this.#entries, this.#frame.mostPoints);
    if (entries.length === 0 || this.#lotRefusal !== null) {
      [this.#lot, this.#isLotStale] = [null, false];
      return;
    }
    const missing = entries.find(({ item }) => !this.#held.has(item.id));
    if (missing) {
      this.#beginCheck(missing);
      return;
    }
    const ids = entries.map(({ item }) => item.id);
    this.#begin({ kind: "lot" }, { kind: "lot", ids }, MOST_LOT_MS + ids.length * MOST_LOT_MS_A_FILE);
  }

  #begin(task: Task, request: CheckRequest, milliseconds: number): void {
    this.#task = task;
    this.#timer = setTimeout(() => this.#stopTask(), milliseconds);
    this.#worker?.post(request);
  }

  #publish(): void {
    this.#state = {
      items: this.#entries.map(({ item }) => item),
      lot: this.#isLotStale ? null : this.#lot,
      lotRefusal: this.#lotRefusal,
      isScoringLot: this.#isLotStale && this.#canCheck && !this.#entries.some(({ item }) => isPending(item)),
      canCheck: this.#canCheck,
    };
    for (const listener of this.#listeners) listener();
  }
}

/** Not checked yet. */
export const isPending = ({ state }: CheckItem): boolean =>
  state === "waiting" || state === "reading" || state === "scoring";

/** Checked, or not refused at least. */
export const isSendable = ({ state }: CheckItem): boolean => state === "checked" || state === "unchecked";

/** Whether unit and temperature are known: without both a file cannot be submitted. */
export const isPlaced = ({ serial, temperature }: CheckedSweep): boolean => serial !== null && temperature !== null;

function tooManyPoints(entries: readonly Entry[], most: number): string | null {
  const points = entries.reduce((sum, { item }) => sum + (item.checked?.points ?? 0), 0);
  if (points <= most) return null;
  return `Together these files hold more than ${most.toLocaleString("en")} points, which is the most a quote takes. Save the sweeps with fewer points.`;
}

/** Starts the worker of this product; null where the browser has none. */
export const startCheckWorker: StartCheckWorker = (onReply, onBroken) => {
  if (typeof Worker === "undefined") return null;
  try {
    const worker = new Worker(new URL("../workers/check-files.ts", import.meta.url), { type: "module" });
    worker.addEventListener("message", ({ data }: MessageEvent<CheckReply>) => onReply(data));
    worker.addEventListener("error", onBroken);
    return { post: (request) => worker.postMessage(request), end: () => worker.terminate() };
  } catch {
    return null;
  }
};
