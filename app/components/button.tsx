// Buttons and links that look like them: filled for the page's one main verb, outlined, or plain.
import type { ComponentProps, ReactNode } from "react";
import { Link } from "react-router";
import { usePressed } from "./form-state";

export type ButtonKind = "filled" | "outlined" | "plain";

const common =
  "inline-flex min-h-9 pointer-coarse:min-h-11 items-center justify-center gap-2 rounded-field border py-1.5 text-13 font-semibold whitespace-nowrap no-underline transition-opacity print-hidden";
const kinds: Record<ButtonKind, string> = {
  filled: "border-signal bg-signal px-4 text-on-signal hover:opacity-90",
  outlined: "border-edge px-4 text-ink hover:border-ink",
  plain: "border-transparent px-2 text-signal hover:underline",
};
const waiting = "aria-busy:cursor-progress aria-busy:opacity-80 disabled:cursor-not-allowed disabled:opacity-50";

const classes = (kind: ButtonKind, className = "") => `${common} ${kinds[kind]} ${waiting} ${className}`;

interface ButtonProps extends Omit<ComponentProps<"button">, "type"> {
  kind?: ButtonKind;
  type?: "submit" | "button" | "reset";
  /** Keeps width and label. By default true while the form sends what this button was pressed for. */
  busy?: boolean;
  children: ReactNode;
}

export function Button({ kind = "outlined", type = "submit", busy, className, children, ...rest }: ButtonProps) {
  const pressed = usePressed(rest.name, rest.value);
  const isBusy = busy ?? (type === "submit" && pressed);
  return (
    <button type={type} {...rest} aria-busy={isBusy || undefined} className={classes(kind, className)}>
      {children}
    </button>
  );
}

interface LinkButtonProps extends ComponentProps<typeof Link> {
  kind?: ButtonKind;
}

export function LinkButton({ kind = "outlined", className, ...rest }: LinkButtonProps) {
  return <Link {...rest} className={classes(kind, className)} />;
}
