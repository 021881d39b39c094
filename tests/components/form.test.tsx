// The form as sent by the server: wiring of labels, hints and errors, typed input kept, secrets not.
import { renderToStaticMarkup } from "react-dom/server";
import { createRoutesStub } from "react-router";
import { expect, test } from "vitest";
import { CheckField, Field, PostForm, SelectField, TextAreaField } from "~/components/form";
import type { FormState } from "~/forms/form";

const options = [
  { value: "simple", label: "Simple acceptance" },
  { value: "guarded", label: "Guarded acceptance" },
];

function render(state?: FormState): string {
  const Page = () => (
    <PostForm state={state} idempotencyKey="key-1">
      <Field name="limit" label="Limit" unit="dB" hint="Positive." />
      <Field name="password" label="Password" type="password" />
      <SelectField name="rule" label="Decision rule" options={options} defaultValue="simple" />
      <TextAreaField name="text" label="Text" />
      <CheckField name="agreed" label="Agreed" />
    </PostForm>
  );
  const Stub = createRoutesStub([{ path: "/", Component: Page }]);
  return renderToStaticMarkup(<Stub />);
}

const refused: FormState = {
  values: { limit: "0,95", password: "do not echo this", rule: "guarded", text: "Typed <b>.", agreed: "on" },
  errors: { limit: ["Write 0.95 with a point."], form: ["The RFQ is closed."] },
};

const tag = (html: string, name: string) =>
  new RegExp(`<(?:input|select|textarea)[^>]*name="${name}"[^>]*>`).exec(html)?.[0] ?? "";
const attribute = (element: string, name: string) => new RegExp(`\\b${name}="([^"]*)"`).exec(element)?.[1] ?? "";

test("a fresh form has its key, no summary, and leaves validation to the server", () => {
  const html = render();
  expect(html).toContain('<input type="hidden" name="idempotencyKey" value="key-1"/>');
  expect(html).not.toContain('role="alert"');
  expect(html).not.toContain("aria-invalid");
  expect(html).toMatch(/<form[^>]*novalidate/i);
  expect(html).toMatch(/<form[^>]*method="post"/);
});

test("what was typed comes back, except a password", () => {
  const html = render(refused);
  expect(attribute(tag(html, "limit"), "value")).toBe("0,95");
  expect(html).toMatch(/<option[^>]*value="guarded"[^>]*selected=""/);
  expect(html).toContain("Typed &lt;b&gt;.</textarea>");
  expect(tag(html, "agreed")).toContain('checked=""');
  expect(html).not.toContain("do not echo this");
});

test("the control that was refused is marked and described by its sentence, its unit and its hint", () => {
  const html = render(refused);
  const control = tag(html, "limit");
  expect(attribute(control, "aria-invalid")).toBe("true");
  const described = attribute(control, "aria-describedby").split(" ");
  const texts = described.map(
    (id) => new RegExp(`id="${id}"[^>]*>(.*?)</(?:p|span)>`, "s").exec(html)?.[1] ?? "missing",
  );
  expect(texts.join("|")).toMatch(/\|dB\|Positive\.$/);
  expect(html).toContain("Write 0.95 with a point.</p>");
  expect(tag(html, "rule")).not.toContain("aria-invalid");
});

test("every control has a label, and the summary takes focus without script and links to the refused control", () => {
  const html = render(refused);
  for (const name of ["limit", "password", "rule", "text", "agreed"])
    expect(html).toContain(`for="${attribute(tag(html, name), "id")}"`);
  const summary = /<div[^>]*role="alert"[^>]*>/.exec(html)?.[0] ?? "";
  expect(summary.toLowerCase()).toContain("autofocus");
  expect(summary).toContain('tabindex="-1"');
  expect(html).toContain("The RFQ is closed.");
  expect(html).toContain(`href="#${attribute(tag(html, "limit"), "id")}"`);
});
