// Who walks: strangers to the demo's buyer and suppliers, made as rows, and a rival supplier of the demo; each with a session.
import assert from "node:assert/strict";
import { createHash } from "node:crypto";
import { withConnection } from "../../db/mariadb";
import { BUYER, PASSWORD, PEOPLE } from "../../db/seeds/demo-cast";
import { hashPassword } from "../../app/services/passwords.server";
import type { IdName } from "./access-routes";
import type { JourneyWorld } from "./journey";

export interface Actor {
  readonly name: string;
  readonly kind: "buyer" | "supplier";
  /** "" for nobody. */
  readonly cookie: string;
}

const STRANGER_PASSWORD = "no part of this house";

/** A buyer and a supplier that share nothing with the demo, and one invited to the same RFQ as the supplier spied on. */
export async function openActors(world: JourneyWorld): Promise<readonly Actor[]> {
  const strangers = [
    { name: "a foreign buyer", kind: "buyer", role: "admin", email: "stranger@outside.example.test" },
    { name: "a foreign supplier", kind: "supplier", role: "supplier", email: "stranger@elsewhere.example.test" },
  ] as const;
  for (const stranger of strangers) await insertStranger(world, stranger);
  const rival = { name: "a rival supplier", kind: "supplier", email: PEOPLE.orme.email, password: PASSWORD } as const;
  const people = [...strangers.map((stranger) => ({ ...stranger, password: STRANGER_PASSWORD })), rival];
  return Promise.all(
    people.map(async ({ name, kind, email, password }) => ({
      name,
      kind,
      cookie: await cookieOf(world, email, password),
    })),
  );
}

interface Stranger {
  readonly name: string;
  readonly kind: "buyer" | "supplier";
  readonly role: string;
  readonly email: string;
}

async function insertStranger(world: JourneyWorld, { name, kind, role, email }: Stranger): Promise<void> {
  const hash = await hashPassword(STRANGER_PASSWORD);
  const publicId = (text: string) => createHash("sha256").update(text).digest("hex").slice(0, 16);
  await withConnection(world.product.ownerUrl, async (connection) => {
    await connection.query(
      "INSERT INTO organisations (public_id, kind, name, time_zone, currency, created_at) VALUES (?, ?, ?, 'UTC', 'EUR', UTC_TIMESTAMP(3))",
      [publicId(name), kind, `Organisation of ${name}`],
    );
    await connection.query(
      `INSERT INTO users (public_id, organisation_id, organisation_kind, email, name, role, password_hash, time_zone, created_at)
        SELECT ?, id, kind, ?, ?, ?, ?, 'UTC', UTC_TIMESTAMP(3) FROM organisations WHERE public_id = ?`,
      [publicId(email), email, name, role, hash, publicId(name)],
    );
  });
}

async function cookieOf(world: JourneyWorld, email: string, password: string): Promise<string> {
  const { appUrl } = world.product;
  const response = await fetch(`${appUrl}/sign-in`, {
    method: "POST",
    redirect: "manual",
    headers: { Origin: appUrl },
    body: new URLSearchParams({ email, password }),
  });
  const cookie = response.headers.getSetCookie().map((header) => header.split(";", 1)[0]);
  assert.ok(response.status === 302 && cookie.length > 0, `${email} could not sign in: ${response.status}`);
  return cookie.join("; ");
}

/** The demo's engineer and the supplier Halden, whose rows the strangers ask for. */
export async function openOwners(world: JourneyWorld): Promise<Readonly<Record<"buyer" | "supplier", Actor>>> {
  const { engineer, halden } = PEOPLE;
  return {
    buyer: { name: "the buyer's engineer", kind: "buyer", cookie: await cookieOf(world, engineer.email, PASSWORD) },
    supplier: { name: "the supplier itself", kind: "supplier", cookie: await cookieOf(world, halden.email, PASSWORD) },
  };
}

/**
 * Real ids of the demo's buyer and of what the supplier Halden gave it.
 *
 * @param which "submitted": of the quote that is in; "draft": of the one it still works on
 */
export async function demoIds(
  world: JourneyWorld,
  which: "submitted" | "draft" = "submitted",
): Promise<Readonly<Record<IdName, string>>> {
  const order = which === "submitted" ? "ASC" : "DESC";
  return withConnection(world.product.ownerUrl, async (connection) => {
    const one = async (sql: string): Promise<string> => {
      const rows: { id: string }[] = await connection.query(`${sql} ORDER BY t.id ${order} LIMIT 1`, [
        BUYER,
        PEOPLE.halden.email,
      ]);
      const id = rows[0]?.id;
      assert.ok(id, `the demo has no row for: ${sql}`);
      return id;
    };
    const ofBuyer = (table: string) =>
      one(
        `SELECT t.public_id AS id FROM ${table} t JOIN organisations o ON o.id = t.buyer_organisation_id WHERE o.name = ?`,
      );
    const ofHalden = (table: string) =>
      one(
        `SELECT t.public_id AS id FROM ${table} t JOIN organisations o ON o.id = t.buyer_organisation_id
          JOIN users u ON u.organisation_id = t.supplier_organisation_id WHERE o.name = ? AND u.email = ?`,
      );
    return {
      specification: await ofBuyer("specifications"),
      rfq: await ofBuyer("rfqs"),
      quote: await ofHalden("quotes"),
      invitation: await ofHalden("invitations"),
      measurement: await ofHalden("measurements"),
      file: await ofHalden("files"),
    };
  });
}

/** Tables that answering a request writes without anybody's wish: when a session was last seen. */
const LEFT_OUT = ["sessions"];

/** A checksum of every table's rows, by name, once no mail or job is waiting any more. */
export async function tableChecksums(world: JourneyWorld): Promise<Record<string, string>> {
  return withConnection(world.product.ownerUrl, async (connection) => {
    for (let round = 0; round < 300; round += 1) {
      const waiting: { n: number }[] = await connection.query(
        "SELECT (SELECT COUNT(*) FROM outbox_emails WHERE state = 'pending') + (SELECT COUNT(*) FROM jobs WHERE state = 'pending') AS n",
      );
      if (Number(waiting[0]?.n) === 0) break;
      await new Promise((resolve) => setTimeout(resolve, 100));
    }
    const tables: { name: string }[] = await connection.query(
      "SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE() AND table_type = 'BASE TABLE'",
    );
    const names = tables.map(({ name }) => name).filter((name) => !LEFT_OUT.includes(name));
    const sums: { Table: string; Checksum: number }[] = await connection.query(
      `CHECKSUM TABLE ${names.map((name) => `\`${name}\``).join(", ")}`,
    );
    return Object.fromEntries(sums.map((row) => [row.Table, String(row.Checksum)]));
  });
}
