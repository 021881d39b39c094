// Asks before typed input that was not sent is left behind, within the app and when the tab closes.
import { useEffect, useRef, type RefObject } from "react";
import { useBlocker } from "react-router";
import type { FormState } from "~/forms/form";

const question = "Leave without saving? What you typed here is lost.";

/** Only one may stand on a page: the router blocks for a single reason at a time. */
export function UnsavedGuard({ form, state }: { form: RefObject<HTMLFormElement | null>; state: FormState }) {
  const changed = useRef(false);
  const blocker = useBlocker(
    ({ currentLocation, nextLocation }) => changed.current && currentLocation.pathname !== nextLocation.pathname,
  );

  useEffect(() => {
    if (blocker.state !== "blocked") return;
    if (window.confirm(question)) blocker.proceed();
    else blocker.reset();
  }, [blocker]);

  // What was sent and refused is unsaved again; what the page began with is as it was stored.
  const drawn = useRef(state);
  useEffect(() => {
    if (state !== drawn.current && Object.keys(state.errors).length > 0) changed.current = true;
    drawn.current = state;
  }, [state]);

  useEffect(() => {
    const element = form.current;
    const note = () => (changed.current = true);
    const forget = () => (changed.current = false);
    const ask = (event: BeforeUnloadEvent) => {
      if (changed.current) event.preventDefault();
    };
    element?.addEventListener("input", note);
    element?.addEventListener("submit", forget);
    window.addEventListener("beforeunload", ask);
    return () => {
      element?.removeEventListener("input", note);
      element?.removeEventListener("submit", forget);
      window.removeEventListener("beforeunload", ask);
    };
  }, [form]);

  return null;
}
