// The worker's closing loop.
import { setTimeout as sleep } from "node:timers/promises";
import { expect, test } from "vitest";
import { Rfq } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { runClosingLoop } from "~/jobs/closing.server";
import { buildOrganisation, buildPerson, buildRfq } from "../support/factories";
import { useDatabase } from "../support/database";

useDatabase();

const stored = (rfq: Rfq) => Rfq.findByPk(rfq.id, { actor: SYSTEM, rejectOnEmpty: true });

test("the closing loop marks an RFQ soon after its due date and ends when it is told to", async () => {
  const engineer = await buildPerson(await buildOrganisation("buyer"));
  const { rfq } = await buildRfq(engineer, { dueAt: new Date(Date.now() + 300) });
  const stop = new AbortController();
  const loop = runClosingLoop({ signal: stop.signal, pollMilliseconds: 50 });
  for (let k = 0; k < 100 && (await stored(rfq)).status === "open"; k += 1) await sleep(50);
  stop.abort();
  await loop;
  const row = await stored(rfq);
  expect(row.status).toBe("closed");
  expect(row.closedAt).toEqual(row.dueAt);
});
