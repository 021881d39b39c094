// Rows of the specification form as the server sends them: each kind with its own fields and no others.
import { renderToStaticMarkup } from "react-dom/server";
import { createRoutesStub } from "react-router";
import { expect, test } from "vitest";
import { PostForm } from "~/components/form";
import { LineFields } from "~/components/specification-line-fields";
import { readRows } from "~/components/specification-rows";
import type { FormValues } from "~/forms/fields";
import { LINE_FIELDS, LINE_KINDS } from "~/forms/specification-line-kinds";

const nothing = () => undefined;

function markupOf(values: FormValues): string {
  const [row] = readRows(values);
  if (!row) throw new Error("no row");
  const Page = () => (
    <PostForm>
      <LineFields row={row} liveErrors={{}} onChange={nothing} onRemove={nothing} />
    </PostForm>
  );
  const Stub = createRoutesStub([{ path: "/", Component: Page }]);
  return renderToStaticMarkup(<Stub />);
}

const fieldsOf = (markup: string): string[] =>
  [...markup.matchAll(/name="lines\.0\.([a-zA-Z]+)"/g)].map(([, field]) => field ?? "").sort();

test("each kind shows the fields it takes and no others, with or without script", () => {
  for (const kind of LINE_KINDS) {
    const expected = [
      "kind",
      "lineKey",
      ...LINE_FIELDS[kind],
      ...(kind === "declared" ? [] : ["temperature"]),
      ...(kind === "return-loss" ? ["port"] : []),
    ];
    expect(fieldsOf(markupOf({ "lines.0.kind": kind })), kind).toEqual(expected.sort());
  }
});

test("a row without a kind shows band and limit, and a button for those who have no script", () => {
  const markup = markupOf({ "lines.0.kind": "" });
  expect(fieldsOf(markup)).toEqual(["from", "kind", "limit", "limitEnd", "lineKey", "to"]);
  expect(markup).toMatch(/<noscript[^>]*>.*value="show-fields"/);
});

test("text that the kind does not take stays in sight", () => {
  const markup = markupOf({ "lines.0.kind": "bandwidth", "lines.0.relativeFrom": "1920" });
  expect(markup).toMatch(/name="lines\.0\.relativeFrom"[^>]*value="1920"/);
});

test("the fold of rarer fields is open where something stands in it", () => {
  expect(markupOf({ "lines.0.kind": "ripple" })).not.toContain(`open=""`);
  expect(markupOf({ "lines.0.kind": "ripple", "lines.0.maxStep": "1" })).toMatch(/<details open=""/);
});
