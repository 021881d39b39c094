// Hands out an uploaded file as it came, chunk by chunk, and breaks off rather than end well if it is damaged.
import { createHash } from "node:crypto";
import { inflateSync } from "node:zlib";
import { FileChunk, StoredFile } from "~/db/models";
import type { Person } from "./person.server";

export interface Download {
  readonly name: string;
  readonly size: number;
  readonly body: ReadableStream<Uint8Array>;
}

/** Null where the person does not see the file: it is the supplier's, and once submitted the buyer's too. */
export async function openFile(person: Person, publicId: string): Promise<Download | null> {
  const file = await StoredFile.findOne({ where: { publicId }, actor: person });
  return file && { name: file.name, size: file.size, body: streamOf(person, file) };
}

function streamOf(person: Person, file: StoredFile): ReadableStream<Uint8Array> {
  const hash = createHash("sha256");
  let ordinal = 0;
  return new ReadableStream({
    async pull(controller) {
      const chunk = await FileChunk.findOne({ where: { fileId: file.id, ordinal }, actor: person });
      if (chunk) {
        const bytes = inflateSync(chunk.bytes);
        hash.update(bytes);
        ordinal += 1;
        controller.enqueue(bytes);
      } else if (hash.digest().equals(file.sha256)) controller.close();
      else controller.error(new Error(`file ${file.publicId} is damaged`));
    },
  });
}

/** Headers under which a browser saves the bytes and never shows them. */
export function downloadHeaders({ name, size }: Pick<Download, "name" | "size">): Headers {
  const plain = name.replace(/[^\x20-\x7e]|["\\%]/g, "_");
  const encoded = encodeURIComponent(name).replace(
    /['()*]/g,
    (mark) => `%${mark.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return new Headers({
    "Content-Type": "application/octet-stream",
    "Content-Length": String(size),
    "Content-Disposition": `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`,
    "Content-Security-Policy": "sandbox; default-src 'none'",
  });
}
