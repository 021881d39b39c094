// What the log may hold of an address and of a fault: no link's token, no value of a statement.
import { QueryTypes } from "sequelize";
import { expect, test } from "vitest";
import { sequelize } from "~/db/connection.server";
import { User } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { newPublicId, newSecret } from "~/services/identifiers.server";
import { errorFacts, pathWithoutSecrets } from "~/services/log.server";
import { useDatabase } from "../support/database";

useDatabase();

const factsOf = (work: Promise<unknown>): Promise<string> =>
  work.then(
    () => "no fault",
    (error: unknown) => JSON.stringify(errorFacts(error)),
  );

test("the token of a mail's link is left out of its address, in each of the address's shapes", () => {
  const token = newSecret();
  for (const path of [`/password-reset/${token}`, `/invitation/${token}.data`, `//invitation/${token}/`])
    expect(pathWithoutSecrets(path)).not.toContain(token.slice(0, 8));
  const page = `/rfqs/${newPublicId()}/invitations`;
  expect(pathWithoutSecrets(page)).toBe(page);
});

test("a fault of the database is told by what went wrong, without the values of its statement", async () => {
  const written = await factsOf(
    User.update({ passwordHash: "secret-hash", role: "nobody" as "admin" }, { where: { id: 1 }, actor: SYSTEM }),
  );
  const read = await factsOf(
    sequelize.query("SELECT no_column FROM users WHERE email = :email", {
      type: QueryTypes.SELECT,
      replacements: { email: "secret@halden.example" },
    }),
  );
  expect(read).toContain("no_column");
  expect(read).toContain("1054");
  expect(written + read).not.toContain("secret");
});
