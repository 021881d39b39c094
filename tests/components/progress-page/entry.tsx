// A page that waits for scoring, for the test in a browser: its loader counts how often it is read.
import { createRoot } from "react-dom/client";
import { createRoutesStub } from "react-router";
import { useReloadWhile, useScoringProgress } from "~/components/use-scoring-progress";

declare global {
  interface Window {
    reads: number;
  }
}
window.reads = 0;

async function loader() {
  window.reads += 1;
  await fetch("/page.data");
  return null;
}

function ProgressPage() {
  const { state = "unheard", done = 0, total = 0 } = useScoringProgress("quote00000000001") ?? {};
  return (
    <p role="status">
      {state} {done} of {total}
    </p>
  );
}

function ReloadPage() {
  useReloadWhile(true);
  return <p role="status">compared</p>;
}

const stub = (path: string, Component: () => React.ReactNode) => ({
  path,
  Component,
  loader,
  ErrorBoundary: () => <p role="alert">Something went wrong</p>,
});

const Stub = createRoutesStub([stub("/progress", ProgressPage), stub("/reload", ReloadPage)]);
createRoot(document.body.appendChild(document.createElement("div"))).render(
  <Stub initialEntries={[window.location.pathname]} />,
);
