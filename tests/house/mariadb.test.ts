// The MariaDB of a checkout: what was committed survives a kill, and two servers never share one data folder.
import { mkdir, mkdtemp, rm, writeFile } from "node:fs/promises";
import net from "node:net";
import path from "node:path";
import { afterAll, beforeAll, expect, test } from "vitest";
import { reservePort } from "../../db/free-port";
import {
  createDatabase,
  grantApplicationUser,
  PortTakenError,
  startMariadb,
  withConnection,
  type Mariadb,
} from "../../db/mariadb";

const DATABASE = "tenderband_house";
let folder: string;

beforeAll(async () => {
  await mkdir(".tenderband", { recursive: true });
  folder = await mkdtemp(path.join(".tenderband", "house-"));
});
afterAll(() => rm(folder, { recursive: true, force: true }));

async function startIn(place: string, log?: (line: string) => void): Promise<Mariadb> {
  const reserved = await reservePort();
  await reserved.release();
  return startMariadb({ folder: place, port: reserved.port, log });
}

async function numbersIn(server: Mariadb): Promise<number[]> {
  return withConnection(server.url(DATABASE), async (connection) => {
    const rows: { number: number }[] = await connection.query("SELECT number FROM numbers ORDER BY number");
    return rows.map(({ number }) => number);
  });
}

test("rows that were committed are there after the server is killed and started again, twice", async () => {
  let server = await startIn(folder);
  await createDatabase(server.ownerUrl(""), DATABASE);
  await withConnection(server.ownerUrl(DATABASE), (connection) =>
    connection.query("CREATE TABLE numbers (number INT PRIMARY KEY)"),
  );
  await grantApplicationUser(server.ownerUrl(""), DATABASE);
  for (const number of [1, 2]) {
    await withConnection(server.url(DATABASE), (connection) =>
      connection.query("INSERT INTO numbers (number) VALUES (?)", [number]),
    );
    process.kill(server.pid, "SIGKILL");
    await server.exited;
    server = await startIn(folder);
  }
  expect(await numbersIn(server)).toEqual([1, 2]);
  await server.stop();
});

test("a server still running on the data is ended before another is started there", async () => {
  const first = await startIn(folder);
  const lines: string[] = [];
  const second = await startIn(folder, (line) => lines.push(line));
  await first.exited;
  expect(lines).toEqual([expect.stringContaining(`process ${first.pid}`)]);
  expect(await numbersIn(second)).toEqual([1, 2]);
  await second.stop();
});

test("a data folder that was being made when the run was killed is made anew", async () => {
  const place = path.join(folder, "half-made");
  await mkdir(path.join(place, "data.making", "mysql"), { recursive: true });
  await writeFile(path.join(place, "data.making", "ibdata1"), "cut off");
  const server = await startIn(place);
  const rows: unknown[] = await withConnection(server.url(""), (connection) => connection.query("SELECT 1 AS one"));
  expect(rows).toHaveLength(1);
  await server.stop();
});

test("a folder whose path is too long for a socket address works", async () => {
  const place = path.join(
    folder,
    "a-folder-name-of-forty-characters-or-so-1",
    "a-folder-name-of-forty-characters-or-so-2",
  );
  const server = await startIn(path.join(place, "a-folder-name-of-forty-characters-or-so-3"));
  await server.stop();
});

test("a port that another program uses is named in the error", async () => {
  const other = net.createServer();
  await new Promise<void>((resolve) => other.listen(0, "127.0.0.1", resolve));
  const address = other.address();
  const port = typeof address === "object" && address ? address.port : 0;
  const error: unknown = await startMariadb({ folder, port }).then(
    () => undefined,
    (reason: unknown) => reason,
  );
  other.close();
  expect(error).toBeInstanceOf(PortTakenError);
  expect(String(error)).toContain(`port ${port} is taken`);
});
