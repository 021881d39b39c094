// Receives uploaded files: streamed to disk under random names, handed over, and removed from the disk whatever happens.
import { createWriteStream } from "node:fs";
import { mkdir, readdir, rm, stat } from "node:fs/promises";
import path from "node:path";
import { Readable } from "node:stream";
import type { ReadableStream } from "node:stream/web";
import formidable from "formidable";
import { config } from "~/config.server";
import { newSecret } from "./identifiers.server";

const MEBIBYTE = 1024 * 1024;
export const MOST_FILE_BYTES = 64 * MEBIBYTE;
export const MOST_FILES = 200;
/** Of one request; more than a single file takes only where a form without script sends many. */
const MOST_REQUEST_BYTES = 512 * MEBIBYTE;
/** How much of a refused request is still read, so that the browser gets to see the answer. */
const MOST_DRAINED_BYTES = 64 * MEBIBYTE;
const DRAIN_WITHIN_MS = 15_000;

export const TOO_LARGE = "The file is larger than 64 MiB. Save the sweep with fewer points, or split it.";
const TOO_LARGE_TOGETHER = "The files are larger than 512 MiB together. Send fewer at once.";
const TOO_MANY = `At most ${MOST_FILES} files can be sent at once.`;
const MALFORMED = "The upload did not arrive in one piece. Send it again.";

export interface ReceivedFile {
  /** On disk until the handler returns. */
  readonly path: string;
  /** As the sender named it, without folders. */
  readonly name: string;
  readonly size: number;
}

export interface Received {
  readonly files: readonly ReceivedFile[];
  readonly fields: Readonly<Record<string, string>>;
}

/** Why nothing was taken; `status` is what the answer carries. */
export interface UploadRefusal {
  readonly ok: false;
  readonly status: 400 | 413;
  readonly error: string;
}

class FileTooLargeError extends Error {}

/** Whether a request carries files, as a form with `enctype="multipart/form-data"` sends them. */
export const isMultipart = (request: Request): boolean =>
  (request.headers.get("Content-Type") ?? "").toLowerCase().startsWith("multipart/form-data");

/** Numbers formidable gives its errors: more files than allowed, one file larger than allowed. */
const TOO_MANY_FILES = 1015;
const FILE_TOO_LARGE = 1016;

/**
 * Streams the files of a multipart request to the upload folder, calls `use` with them, and removes them. A request that is
 * too large or malformed is an expected outcome; one the client broke off is thrown.
 */
export async function receiveFiles<T>(
  request: Request,
  use: (received: Received) => Promise<T>,
): Promise<{ readonly ok: true; readonly value: T } | UploadRefusal> {
  if (!request.body || !isMultipart(request)) return { ok: false, status: 400, error: MALFORMED };
  const root = path.resolve(config().uploadFolder);
  await (cleared ??= removeAbandoned(root).catch(() => undefined));
  const folder = path.join(root, `upload-${newSecret().slice(0, 16)}`);
  // A length is left out: it would only serve for progress, and formidable takes a body without either header for empty.
  const headers = { "content-type": request.headers.get("Content-Type") ?? "", "transfer-encoding": "chunked" };
  const source = Object.assign(Readable.fromWeb(request.body as ReadableStream), { headers });
  const abort = () => source.destroy(new Error("the client broke the upload off"));
  request.signal.addEventListener("abort", abort, { once: true });
  // A source that fails after its reader has let go of it must not end the process.
  source.on("error", () => undefined);
  try {
    await mkdir(folder, { recursive: true, mode: 0o700 });
    const received = await parse(source, folder);
    return { ok: true, value: await use(received) };
  } catch (error) {
    const refusal = request.signal.aborted ? null : refusalOf(error);
    if (!refusal) throw error;
    await drain(source);
    return refusal;
  } finally {
    request.signal.removeEventListener("abort", abort);
    await rm(folder, { recursive: true, force: true });
  }
}

/** Longer than any upload takes. */
const ABANDONED_AFTER_MS = 24 * 60 * 60 * 1000;
/** Once a process, at its first upload. */
let cleared: Promise<void> | undefined;

/** Removes the folders of uploads that a killed process left behind; nothing else that lies there. */
export async function removeAbandoned(root: string): Promise<void> {
  for (const name of await readdir(root)) {
    if (!/^upload-[\w-]{16}$/.test(name)) continue;
    const folder = path.join(root, name);
    const { mtimeMs } = await stat(folder);
    if (Date.now() - mtimeMs > ABANDONED_AFTER_MS) await rm(folder, { recursive: true, force: true });
  }
}

type Source = Readable & { readonly headers: Record<string, string> };

async function parse(source: Source, folder: string): Promise<Received> {
  const paths = new Map<string, string>();
  const form = formidable({
    maxFileSize: MOST_FILE_BYTES,
    maxTotalFileSize: MOST_REQUEST_BYTES,
    maxFiles: MOST_FILES,
    maxFields: 20,
    maxFieldsSize: MEBIBYTE,
    allowEmptyFiles: true,
    minFileSize: 0,
    // A file field nobody filled arrives as a file without a name.
    filter: ({ name, originalFilename }) => name === "file" && Boolean(originalFilename),
    fileWriteStreamHandler: (file) => {
      const place = path.join(folder, newSecret().slice(0, 24));
      paths.set((file as unknown as { newFilename: string }).newFilename, place);
      return createWriteStream(place, { flags: "wx", mode: 0o600 });
    },
  });
  form.on("fileBegin", (_name, file) => {
    const events = file as unknown as NodeJS.EventEmitter;
    events.on("progress", (size: number) => {
      if (size > MOST_FILE_BYTES) events.emit("error", new FileTooLargeError());
    });
  });
  const [fields, files] = await form.parse(source as unknown as Parameters<typeof form.parse>[0]);
  return {
    fields: Object.fromEntries(Object.entries(fields).map(([name, values]) => [name, values?.at(-1) ?? ""])),
    files: (files.file ?? []).map(({ newFilename, originalFilename, size }) => ({
      path: paths.get(newFilename) ?? "",
      name: plainName(originalFilename ?? ""),
      size,
    })),
  };
}

/** The last part of a name, without characters that are not shown, at most 200 of them. */
function plainName(name: string): string {
  const last = name.split(/[/\\]/u).at(-1) ?? "";
  const shown = last.replace(/[\p{Cc}\p{Cf}]/gu, "").trim();
  return Array.from(shown === "" ? "unnamed" : shown)
    .slice(-200)
    .join("");
}

function refusalOf(error: unknown): UploadRefusal | null {
  if (error instanceof FileTooLargeError) return { ok: false, status: 413, error: TOO_LARGE };
  if (!(error instanceof Error) || !("httpCode" in error) || !("code" in error)) return null;
  if (error.code === FILE_TOO_LARGE) return { ok: false, status: 413, error: TOO_LARGE };
  if (error.code === TOO_MANY_FILES) return { ok: false, status: 413, error: TOO_MANY };
  if (error.httpCode === 413) return { ok: false, status: 413, error: TOO_LARGE_TOGETHER };
  return { ok: false, status: 400, error: MALFORMED };
}

/** Reads what is left of a refused request, up to a bound: a connection cut before its end hides the answer. */
async function drain(source: Readable): Promise<void> {
  if (source.readableEnded || source.destroyed) return;
  let bytes = 0;
  await new Promise<void>((resolve) => {
    const timer = setTimeout(resolve, DRAIN_WITHIN_MS);
    const end = () => {
      clearTimeout(timer);
      resolve();
    };
    source.on("data", (chunk: Buffer) => {
      bytes += chunk.length;
      if (bytes > MOST_DRAINED_BYTES) end();
    });
    source.once("end", end).once("close", end).resume();
  });
  source.destroy();
}
