// Files on their way to the server: two at a time, each by itself, with progress, and cancelled or tried again one by one.

export interface UploadItem {
  readonly id: number;
  readonly name: string;
  /** Bytes. */
  readonly size: number;
  /** "checking": all bytes have left, the server reads and scores them. */
  readonly state: "waiting" | "sending" | "checking" | "refused";
  /** Share of the bytes that have left, 0 to 1. */
  readonly progress: number;
  /** Of a refused one. */
  readonly error?: string;
  /** It never arrived: sending it again may help. */
  readonly canRetry?: boolean;
}

export interface SendCallbacks {
  readonly onProgress: (share: number) => void;
  readonly onAnswer: (status: number, body: unknown) => void;
  readonly onBroken: () => void;
}

/** Begins a transfer and returns how to break it off. */
export type Send = (file: File, callbacks: SendCallbacks) => () => void;

const AT_ONCE = 2;
/** Of one file. */
export const MOST_BYTES = 64 * 1024 * 1024;
export const TOO_LARGE = "The file is larger than 64 MiB. Save the sweep with fewer points, or split it.";
const BROKEN = "The connection broke off. Send it again.";
const UNREADABLE = "The server could not take this file. Send it again in a minute.";

interface Entry {
  item: UploadItem;
  readonly file: File;
  cancel?: () => void;
}

export class UploadQueue {
  readonly #send: Send;
  readonly #onStored: () => void;
  readonly #listeners = new Set<() => void>();
  #entries: Entry[] = [];
  #items: readonly UploadItem[] = [];
  #nextId = 1;

  /** @param onStored told each file that the server has stored; it leaves the queue */
  constructor(send: Send, onStored: () => void) {
    this.#send = send;
    this.#onStored = onStored;
  }

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  };

  /** The same array until something changes. */
  readonly items = (): readonly UploadItem[] => this.#items;

  add(files: readonly File[]): void {
    for (const file of files) {
      const item = { id: this.#nextId, name: file.name, size: file.size, progress: 0 };
      this.#nextId += 1;
      const isTooLarge = file.size > MOST_BYTES;
      const state = isTooLarge ? ({ state: "refused", error: TOO_LARGE } as const) : ({ state: "waiting" } as const);
      this.#entries.push({ file, item: { ...item, ...state } });
    }
    this.#advance();
  }

  /** Breaks a transfer off, or takes a waiting or refused file off the list. */
  cancel(id: number): void {
    this.#entries.find(({ item }) => item.id === id)?.cancel?.();
    this.#remove(id);
  }

  retry(id: number): void {
    const entry = this.#entries.find(({ item }) => item.id === id);
    if (entry?.item.state !== "refused") return;
    const { name, size } = entry.item;
    entry.item = { id, name, size, state: "waiting", progress: 0 };
    this.#advance();
  }

  #advance(): void {
    const isActive = ({ item }: Entry) => item.state === "sending" || item.state === "checking";
    const free = AT_ONCE - this.#entries.filter(isActive).length;
    const waiting = this.#entries.filter(({ item }) => item.state === "waiting").slice(0, Math.max(0, free));
    for (const entry of waiting) this.#begin(entry);
    this.#publish();
  }

  #begin(entry: Entry): void {
    const { id } = entry.item;
    const change = (part: Partial<UploadItem>) => {
      entry.item = { ...entry.item, ...part };
      this.#publish();
    };
    entry.item = { ...entry.item, state: "sending" };
    const refuse = (error: string, canRetry: boolean) => {
      change({ state: "refused", error, canRetry });
      this.#advance();
    };
    entry.cancel = this.#send(entry.file, {
      onProgress: (share) => change({ progress: share, state: share >= 1 ? "checking" : "sending" }),
      onBroken: () => refuse(BROKEN, true),
      onAnswer: (status, body) => {
        const error = status === 201 ? null : refusalIn(body);
        if (error === null) {
          this.#remove(id);
          this.#onStored();
        } else refuse(error ?? UNREADABLE, error === undefined);
      },
    });
  }

  #remove(id: number): void {
    this.#entries = this.#entries.filter(({ item }) => item.id !== id);
    this.#advance();
  }

  #publish(): void {
    this.#items = this.#entries.map(({ item }) => item);
    for (const listener of this.#listeners) listener();
  }
}

/** The sentence of an answer, that of its one file first. */
function refusalIn(body: unknown): string | undefined {
  if (typeof body !== "object" || body === null) return undefined;
  const files = "files" in body && Array.isArray(body.files) ? (body.files as unknown[]) : [];
  for (const holder of [...files, body])
    if (typeof holder === "object" && holder !== null && "error" in holder && typeof holder.error === "string")
      return holder.error;
  return undefined;
}

/** Sends by XMLHttpRequest, since fetch tells no progress of what leaves. */
export const sendTo =
  (address: string): Send =>
  (file, { onProgress, onAnswer, onBroken }) => {
    const request = new XMLHttpRequest();
    const form = new FormData();
    form.set("file", file);
    request.open("POST", address);
    request.responseType = "json";
    request.upload.addEventListener("progress", ({ loaded, total }) => onProgress(total > 0 ? loaded / total : 0));
    request.upload.addEventListener("load", () => onProgress(1));
    request.addEventListener("load", () => onAnswer(request.status, request.response));
    request.addEventListener("error", onBroken);
    request.addEventListener("timeout", onBroken);
    request.send(form);
    return () => request.abort();
  };
