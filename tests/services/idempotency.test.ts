// A form counts once: repeats, races, refusals, and keys that come with another request.
import { expect, test } from "vitest";
import { IdempotencyKey, NumberSeries } from "~/db/models";
import { takeNumber } from "~/db/queries/number-series";
import { SYSTEM } from "~/db/scoping";
import { newIdempotencyKey } from "~/services/identifiers.server";
import { once } from "~/services/idempotency.server";
import { useDatabase } from "../support/database";
import { buildOrganisation, buildPerson } from "../support/factories";

useDatabase();

const takenBy = async (buyerOrganisationId: number) =>
  (await NumberSeries.findOne({ where: { buyerOrganisationId, series: "test" }, actor: SYSTEM }))?.last ?? 0;

async function setUp() {
  const person = await buildPerson(await buildOrganisation("buyer"));
  const key = newIdempotencyKey();
  const take = (request: unknown = { a: 1 }, isFinal: (number: number) => boolean = () => true) =>
    once(person, key, request, isFinal, (transaction) => takeNumber(person.organisationId, "test", transaction));
  return { person, key, take };
}

test("a second press of the same form gets the first one's answer and does nothing", async () => {
  const { person, take } = await setUp();
  expect([await take(), await take(), await take()]).toEqual([1, 1, 1]);
  expect(await takenBy(person.organisationId)).toBe(1);
});

test("ten presses at once count as one", async () => {
  const { person, take } = await setUp();
  const answers = await Promise.all(Array.from({ length: 10 }, () => take()));
  expect(new Set(answers)).toEqual(new Set([1]));
  expect(await takenBy(person.organisationId)).toBe(1);
});

test("a refusal leaves nothing behind and may be tried again with the same key", async () => {
  const { person, take } = await setUp();
  expect(await take({ a: 1 }, () => false)).toBe(1);
  expect([await takenBy(person.organisationId), await IdempotencyKey.count()]).toEqual([0, 0]);
  expect(await take()).toBe(1);
});

test("a key that comes with another request is refused", async () => {
  const { take } = await setUp();
  await take();
  await expect(take({ a: 2 })).rejects.toMatchObject({ init: { status: 409 } });
});

test("a form without a key is refused", async () => {
  const { person } = await setUp();
  await expect(
    once(
      person,
      "",
      {},
      () => true,
      () => Promise.resolve(1),
    ),
  ).rejects.toMatchObject({ init: { status: 409 } });
});

test("running numbers have no gap and no double when forty are taken at once", async () => {
  const { person } = await setUp();
  const keys = Array.from({ length: 40 }, newIdempotencyKey);
  const numbers = await Promise.all(
    keys.map((key) =>
      once(
        person,
        key,
        {},
        () => true,
        (transaction) => takeNumber(person.organisationId, "test", transaction),
      ),
    ),
  );
  expect(numbers.sort((a, b) => a - b)).toEqual(Array.from({ length: 40 }, (_, k) => k + 1));
});
