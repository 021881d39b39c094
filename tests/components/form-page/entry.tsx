// A page with one form and an action that answers when it is told to, for the test in a browser.
import { createRoot } from "react-dom/client";
import { createRoutesStub, Link, useActionData } from "react-router";
import { Button } from "~/components/button";
import { Field, PostForm } from "~/components/form";
import type { FormState } from "~/forms/form";

interface Seen {
  posts: string[];
  answer?: () => void;
}
declare global {
  interface Window {
    seen: Seen;
  }
}
window.seen = { posts: [] };

function FormPage() {
  const state = useActionData<FormState>();
  return (
    <PostForm state={state} idempotencyKey="key-1" guardsUnsaved>
      <Field name="title" label="Title" />
      <Button kind="filled" name="verb" value="save">
        Save
      </Button>
      <Button name="verb" value="release">
        Release
      </Button>
      <Link to="/elsewhere">Elsewhere</Link>
    </PostForm>
  );
}

const text = (data: FormData, name: string): string => {
  const value = data.get(name);
  return typeof value === "string" ? value : "";
};

async function action({ request }: { request: Request }): Promise<FormState> {
  const data = await request.formData();
  window.seen.posts.push(text(data, "verb"));
  await new Promise<void>((resolve) => (window.seen.answer = resolve));
  return { values: { title: text(data, "title") }, errors: { title: ["Give a shorter title."] } };
}

const Stub = createRoutesStub([
  { path: "/", Component: FormPage, action },
  { path: "/elsewhere", Component: () => <h1>Elsewhere</h1> },
]);
createRoot(document.body.appendChild(document.createElement("div"))).render(<Stub />);
