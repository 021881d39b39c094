// What a request may hold: an address of this site to go on to, and as a body a form.
import { RouterContextProvider } from "react-router";
import { expect, test } from "vitest";
import { refuseOtherBodies, safeReturn } from "~/services/request.server";

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

test("a body that is no form is refused with 400, and one that is passes", async () => {
  const send = async (init: RequestInit) => {
    const request = new Request("http://127.0.0.1/sign-in", init);
    const next = () => Promise.resolve(new Response());
    const args = { request, params: {}, context: new RouterContextProvider(), url: new URL(request.url), pattern: "" };
    await refuseOtherBodies(args, next);
  };
  const multipart = new FormData();
  multipart.set("email", "ines@kestrel.example");
  await send({ method: "POST", body: multipart });
  await send({ method: "POST", body: new URLSearchParams() });
  await send({ method: "GET" });
  const refused = { init: { status: 400 } };
  const json = { "Content-Type": "application/json" };
  await expect(send({ method: "POST", body: "{}", headers: json })).rejects.toMatchObject(refused);
  await expect(send({ method: "POST", body: "email=a" })).rejects.toMatchObject(refused);
  await expect(send({ method: "DELETE" })).rejects.toMatchObject(refused);
  const unbounded = { "Content-Type": "multipart/form-data" };
  await expect(send({ method: "POST", body: "x", headers: unbounded })).rejects.toMatchObject(refused);
});
