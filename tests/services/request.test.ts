// Where a form may send its reader on to: an address inside this site and nowhere else.
import { expect, test } from "vitest";
import { safeReturn } from "~/services/request.server";

test("an address of this site is followed with its search and its place", () => {
  expect(safeReturn("/rfqs?state=open&page=2#list")).toBe("/rfqs?state=open&page=2#list");
  expect(safeReturn("/rfqs/../suppliers")).toBe("/suppliers");
});

test("no spelling of another site's address is followed", () => {
  const elsewhere = [
    "https://elsewhere.example/",
    "//elsewhere.example",
    "/\\elsewhere.example",
    "\\\\elsewhere.example",
    "javascript:alert(1)",
    "/\t/elsewhere.example",
    " //elsewhere.example",
    // Their dots are taken out as the address is read, and two slashes are left.
    "/..//elsewhere.example",
    "/.//elsewhere.example",
    "/%2e//elsewhere.example",
    "/rfqs/..//elsewhere.example",
  ];
  for (const target of elsewhere) expect(safeReturn(target, "/open-points"), target).toBe("/open-points");
});

test("what is absent, no text or longer than a form takes falls back", () => {
  for (const target of [null, undefined, "", new File([], "x"), `/${"a".repeat(2_000)}`])
    expect(safeReturn(target, "/open-points")).toBe("/open-points");
});
