// Nobody finds what is not theirs: every route of app/routes.ts asked for by strangers, by nobody, and from another site.
import assert from "node:assert/strict";
import { demoIds, openActors, openOwners, tableChecksums, type Actor } from "./access-actors";
import { ADDRESSES, addressOf, standingOf, type IdName } from "./access-routes";
import type { Journey, JourneyWorld, Step } from "./journey";

const UNKNOWN = "0000000000000000";
const NOBODY: Actor = { name: "nobody", kind: "buyer", cookie: "" };

interface Answer {
  readonly status: number;
  readonly location: string;
  readonly body: string;
}

interface Try {
  readonly method: "GET" | "HEAD" | "POST";
  /** Asked for as the framework's data of the page. */
  readonly data?: true;
  readonly post?: Readonly<Record<string, string>>;
}

type Sender = Readonly<Record<string, string>>;

/** What a browser says of a form that is not the product's own, and what a program says that is no browser. */
const FOREIGN_SENDERS: readonly Sender[] = [
  { Origin: "https://other.example" },
  { Origin: "null" },
  {},
  { Origin: "https://other.example", "Sec-Fetch-Site": "cross-site" },
  { "Sec-Fetch-Site": "same-site" },
];

class Walk {
  actors: readonly Actor[] = [];
  ids: Readonly<Record<IdName, string>> | undefined;
  private before: Record<string, string> = {};

  constructor(private readonly world: JourneyWorld) {}

  async begin(): Promise<void> {
    this.actors = await openActors(this.world);
    this.ids = await demoIds(this.world);
    this.before = await tableChecksums(this.world);
  }

  async assertUnchanged(): Promise<void> {
    assert.deepEqual(await tableChecksums(this.world), this.before, "rows changed");
  }

  /** @param from headers that say where a form was sent from; by default the product's own page */
  async ask(actor: Actor, address: string, { method, data, post }: Try, from?: Sender): Promise<Answer> {
    const { appUrl } = this.world.product;
    const response = await fetch(`${appUrl}${address}${data ? ".data" : ""}`, {
      method,
      redirect: "manual",
      headers: { Accept: "text/html", Cookie: actor.cookie, ...(from ?? { Origin: appUrl }) },
      ...(method === "POST" ? { body: new URLSearchParams(post ?? {}) } : {}),
    });
    const { status } = response;
    return { status, location: response.headers.get("Location") ?? "", body: await response.text() };
  }

  realId(name: IdName): string {
    assert.ok(this.ids, "the walk has not begun");
    return this.ids[name];
  }
}

/** What may differ between two answers that say the same. */
const normalised = (body: string, id: string): string =>
  body
    .replaceAll(id, "ID")
    .replace(/nonce="[^"]*"/g, 'nonce=""')
    .replace(/\\?"nonce\\?",\\?"[A-Za-z0-9+/=]+\\?"/g, "nonce")
    .replace(/[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/g, "REQUEST");

function triesOf(rule: { resource?: true; postOnly?: true; post?: Readonly<Record<string, string>> }): Try[] {
  const reads: Try[] = rule.postOnly ? [] : [{ method: "GET" }, { method: "HEAD" }];
  if (!rule.resource) reads.push({ method: "GET", data: true });
  const posts: Try[] = rule.post ? [{ method: "POST", post: rule.post }] : [];
  if (rule.post && !rule.resource) posts.push({ method: "POST", post: rule.post, data: true });
  return [...reads, ...posts];
}

async function expectAbsent(walk: Walk, actor: Actor, pattern: string, id: string, attempt: Try): Promise<void> {
  const what = `${attempt.method} ${pattern}${attempt.data ? ".data" : ""} by ${actor.name}`;
  const real = await walk.ask(actor, addressOf(pattern, id), attempt);
  const unknown = await walk.ask(actor, addressOf(pattern, UNKNOWN), attempt);
  assert.equal(real.status, 404, `${what}: status`);
  assert.equal(unknown.status, 404, `${what}: status of an unknown id`);
  assert.equal(normalised(real.body, id), normalised(unknown.body, UNKNOWN), `${what}: body`);
}

function steps(world: JourneyWorld): Step[] {
  const walk = new Walk(world);
  return [
    {
      title: "every route of the product has a rule in this walk",
      run: () => {
        for (const address of ADDRESSES) standingOf(address);
        assert.ok(ADDRESSES.length > 40, `only ${ADDRESSES.length} routes were found`);
        return Promise.resolve();
      },
    },
    { title: "a foreign buyer, a foreign supplier and a rival supplier sign in", run: () => walk.begin() },
    {
      title: "what is somebody else's answers them as an unknown id does, by GET, data, HEAD and POST",
      run: async () => {
        let asked = 0;
        for (const address of ADDRESSES) {
          const standing = standingOf(address);
          if (standing.kind !== "id") continue;
          for (const actor of walk.actors)
            for (const attempt of triesOf(standing.rule)) {
              await expectAbsent(walk, actor, address.pattern, walk.realId(standing.rule.id), attempt);
              asked += 1;
            }
        }
        assert.ok(asked > 150, `only ${asked} requests were made`);
      },
    },
    {
      title: "nobody signed in is sent to sign in, or finds nothing",
      run: async () => {
        for (const address of ADDRESSES) {
          const standing = standingOf(address);
          if (standing.kind === "public" || standing.kind === "secret") continue;
          const id = standing.kind === "id" ? walk.realId(standing.rule.id) : UNKNOWN;
          const tries: Try[] = standing.kind === "id" ? triesOf(standing.rule) : [{ method: "GET" }];
          for (const attempt of tries) await expectSignIn(walk, addressOf(address.pattern, id), attempt);
        }
      },
    },
    {
      title: "buyers find no page of suppliers, suppliers none of buyers",
      run: async () => {
        for (const address of ADDRESSES) {
          const standing = standingOf(address);
          if (standing.kind !== "page" || standing.for === "anybody") continue;
          for (const actor of walk.actors) {
            const expected: number = actor.kind === standing.for ? 200 : 404;
            const { status } = await walk.ask(actor, address.pattern, { method: "GET" });
            assert.equal(status, expected, `${address.pattern} for ${actor.name}`);
          }
        }
      },
    },
    {
      title: "a token that was never given out, and a mail that is not there, lead nowhere",
      run: async () => {
        const get = { method: "GET" } as const;
        for (const part of ["/password-reset", "/invitation"]) {
          const { status, location } = await walk.ask(NOBODY, `${part}/${"a".repeat(43)}`, get);
          assert.deepEqual([status, location], [302, part]);
        }
        assert.equal((await walk.ask(NOBODY, `/development/mailbox/${UNKNOWN}`, get)).status, 404);
      },
    },
    {
      title:
        "a form sent from another site, from nowhere, or without an origin is refused on pages and resource routes",
      run: async () => {
        const addresses = ["/sign-in", "/sign-out", "/specifications/new", "/rfqs/new", "/theme", "/organisation"];
        const resource = addressOf("/api/v1/quotes/:quoteId/measurements", walk.realId("quote"));
        for (const address of [...addresses, `${addresses[2]}.data`, resource])
          for (const actor of [NOBODY, ...walk.actors])
            for (const sender of FOREIGN_SENDERS) await expectRefused(walk, actor, address, sender);
      },
    },
    { title: "no row has changed in any of this", run: () => walk.assertUnchanged() },
    {
      title: "the owners find every one of the rows that the others did not",
      run: async () => {
        const owners = await openOwners(world);
        for (const address of ADDRESSES) {
          const standing = standingOf(address);
          if (standing.kind !== "id") continue;
          const { rule } = standing;
          const owner = standing.for === "buyer" ? owners.buyer : owners.supplier;
          const actor = /^\/api\/.*\/(traces|curves)$/.test(address.pattern) ? owners.buyer : owner;
          const attempt: Try = rule.postOnly ? { method: "POST", post: rule.post ?? {} } : { method: "GET" };
          const { status } = await walk.ask(actor, addressOf(address.pattern, walk.realId(rule.id)), attempt);
          const what = `${address.pattern} for ${actor.name}: ${status}`;
          assert.ok(rule.postOnly ? status === 400 : status < 400, what); // the quote is closed: its files stay
        }
      },
    },
    {
      title: "the buyer itself finds nothing of a quote that was not submitted",
      run: async () => {
        const { buyer, supplier } = await openOwners(world);
        const draft = await demoIds(world, "draft");
        const own = `/supplier/quotes/${draft.quote}`;
        assert.equal((await walk.ask(supplier, own, { method: "GET" })).status, 200, "the draft's own supplier");
        for (const address of ADDRESSES) {
          const standing = standingOf(address);
          const isOfQuote = standing.kind === "id" && ["quote", "file"].includes(standing.rule.id);
          if (isOfQuote && !standing.rule.postOnly && standing.for !== "supplier")
            await expectAbsent(walk, buyer, address.pattern, draft[standing.rule.id], { method: "GET" });
        }
      },
    },
  ];
}

/** A redirect to sign in: as a document's, or as the framework's data says it. */
async function expectSignIn(walk: Walk, address: string, attempt: Try): Promise<void> {
  const { status, location, body } = await walk.ask(NOBODY, address, attempt);
  const what = `${attempt.method} ${address}${attempt.data ? ".data" : ""} by nobody: ${status} ${location}`;
  if (status === 404) return;
  assert.ok(attempt.data ? status === 202 : status === 302, what);
  assert.ok(attempt.data ? body.includes("/sign-in?returnTo=") : location.startsWith("/sign-in?returnTo="), what);
}

/** The framework itself answers a page's form with 400 where an Origin differs; the rest, and all of the API, is ours. */
async function expectRefused(walk: Walk, actor: Actor, address: string, sender: Sender): Promise<void> {
  const post = { email: "nobody@outside.example.test", password: "not a password of anybody" };
  const { status } = await walk.ask(actor, address, { method: "POST", post }, sender);
  const mayBeFrameworks = "Origin" in sender && !address.startsWith("/api/");
  const what = `POST ${address} by ${actor.name}, ${JSON.stringify(sender)}: ${status}`;
  assert.ok(status === 403 || (mayBeFrameworks && status === 400), what);
}

const journey: Journey = { title: "Nobody finds what is not theirs", steps };

export default journey;
