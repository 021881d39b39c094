// The worker that checks files in the supplier's browser: reads their bytes here, scores them, posts plain results. Sends nothing.
import type { CheckReply, CheckRequest } from "./check-messages";
import { Checker } from "./checker";

let checker: Checker | undefined;

const reply = (message: CheckReply): void => self.postMessage(message);

self.addEventListener("message", ({ data }: MessageEvent<CheckRequest>) => {
  answer(data).catch((error: unknown) =>
    reply({ kind: "fault", message: error instanceof Error ? error.message : String(error) }),
  );
});

async function answer(request: CheckRequest): Promise<void> {
  if (request.kind === "open") {
    checker = new Checker(request.frame);
    return;
  }
  if (!checker) throw new Error("the worker was not opened");
  if (request.kind === "drop") checker.drop(request.id);
  else if (request.kind === "lot") reply({ kind: "lot", lot: checker.lot(request.ids) });
  else await check(checker, request.id, request.file);
}

async function check(current: Checker, id: number, file: File): Promise<void> {
  const buffer = await file.arrayBuffer().catch(() => null);
  if (buffer === null) {
    reply({ kind: "unread", id });
    return;
  }
  reply({ kind: "scoring", id });
  const outcome = current.check(id, file.name, new Uint8Array(buffer));
  reply(
    outcome.ok ? { kind: "checked", id, checked: outcome.checked } : { kind: "refused", id, refusal: outcome.refusal },
  );
}

reply({ kind: "ready" });
