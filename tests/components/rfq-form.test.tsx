// The form of an RFQ as the server sends it: a draft is saved over the one it was opened on, and over no later one.
import { renderToStaticMarkup } from "react-dom/server";
import { createRoutesStub } from "react-router";
import { expect, test } from "vitest";
import { RfqForm } from "~/components/rfq-form";
import type { FormState } from "~/forms/form";

function lockVersionOf(state: FormState, lockVersion: number): string | undefined {
  const Page = () => (
    <RfqForm state={state} zones={["Europe/Berlin"]} lockVersion={lockVersion} save="Save the draft" />
  );
  const Stub = createRoutesStub([{ path: "/", Component: Page }]);
  return /name="lockVersion" value="(\d+)"/.exec(renderToStaticMarkup(<Stub />))?.[1];
}

test("a draft that was refused keeps the version it was opened on, though the page was drawn again since", () => {
  expect(lockVersionOf({ values: { title: "Band-pass" }, errors: {} }, 4)).toBe("4");
  const refused = { values: { title: "", lockVersion: "4" }, errors: { title: ["Enter a title."] } };
  expect(lockVersionOf(refused, 5)).toBe("4");
});
