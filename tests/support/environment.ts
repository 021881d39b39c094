// Before each test file: the environment its worker's modules read, set before any of them is imported.
import { inject } from "vitest";
import { databaseName } from "./database-name";

const { ownerUrl, applicationUrl } = inject("testServer");
const database = databaseName();

Object.assign(process.env, {
  NODE_ENV: "test",
  DATABASE_URL: `${applicationUrl}${database}`,
  DATABASE_OWNER_URL: `${ownerUrl}${database}`,
  DATABASE_POOL: "8",
  SMTP_URL: "smtp://127.0.0.1:9", // the discard port: a test that means to send says where
  APP_URL: "http://127.0.0.1:5180",
  SESSION_SECRET: "a-secret-for-tests-only-of-forty-letters",
  LOG_LEVEL: "silent",
});
