// The switch between the system's light and our own: a form, so that it works without script.
import { createContext, useContext } from "react";
import { Form, useLocation } from "react-router";

export type Theme = "system" | "light" | "dark";

/** The reader's choice; the root provides it and writes light and dark as `data-theme` on the html element. */
export const ThemeContext = createContext<Theme>("system");

const choices: readonly { theme: Theme; label: string }[] = [
  { theme: "system", label: "System" },
  { theme: "light", label: "Light" },
  { theme: "dark", label: "Dark" },
];

/** Posts `theme` and `returnTo`, the address the reader stays on. */
export function ThemeSwitch({ action = "/theme" }: { action?: string }) {
  const current = useContext(ThemeContext);
  const { pathname, search } = useLocation();
  return (
    <Form method="post" action={action} replace preventScrollReset className="print-hidden">
      <input type="hidden" name="returnTo" value={`${pathname}${search}`} />
      <fieldset className="inline-flex rounded-field border border-edge">
        <legend className="sr-only">Colours</legend>
        {choices.map(({ theme, label }) => (
          <button
            key={theme}
            name="theme"
            value={theme}
            aria-pressed={theme === current}
            className="min-h-7 border-l border-edge px-3 text-12 text-quiet first:border-l-0 hover:text-ink aria-pressed:bg-ink aria-pressed:font-semibold aria-pressed:text-leaf pointer-coarse:min-h-11"
          >
            {label}
          </button>
        ))}
      </fieldset>
    </Form>
  );
}
