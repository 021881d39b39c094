// What stands around a figure to be explored: its readout line, the parts to zoom to, its table, and the picture as a file.
import type { ReactNode, RefObject } from "react";
import { Button } from "~/components/button";
import type { Band } from "~/rf/index";
import { downloadFigure } from "./download-figure";

interface ToolbarProps {
  readonly readout: string;
  /** Curves are on their way: nothing can be pressed yet. */
  readonly waiting: boolean;
  /** Parts of the frequency axis by name, "Passband"; undefined is all. */
  readonly parts?: readonly { readonly name: string; readonly window: Band | undefined }[];
  readonly onWindow?: (window: Band | undefined) => void;
  readonly tableOpen: boolean;
  readonly onTable: (open: boolean) => void;
  readonly children?: ReactNode;
}

export function FigureToolbar({ readout, waiting, parts = [], onWindow, ...props }: ToolbarProps) {
  const { tableOpen, onTable, children } = props;
  return (
    <div className="mb-2 flex flex-wrap items-center gap-x-1 gap-y-2 print-hidden">
      <output
        aria-live="polite"
        className="min-h-11 content-center text-13 tabular-nums max-tablet:w-full tablet:min-w-0 tablet:flex-1"
      >
        {readout}
      </output>
      {parts.map(({ name, window }) => (
        <Button key={name} kind="plain" type="button" disabled={waiting} onClick={() => onWindow?.(window)}>
          {name}
        </Button>
      ))}
      <Button
        kind="plain"
        type="button"
        disabled={waiting}
        aria-expanded={tableOpen}
        onClick={() => onTable(!tableOpen)}
      >
        Table
      </Button>
      {children}
    </div>
  );
}

interface SwitchProps<Value> {
  readonly label: string;
  readonly choices: readonly { readonly name: string; readonly value: Value }[];
  readonly value: Value;
  readonly onChange: (value: Value) => void;
}

/** One of a few, "Stretched | Even". */
export function FigureSwitch<Value>({ label, choices, value, onChange }: SwitchProps<Value>) {
  return (
    <div role="group" aria-label={label} className="inline-flex rounded-field tablet:ms-2 border border-edge">
      {choices.map((choice) => (
        <button
          key={choice.name}
          type="button"
          aria-pressed={value === choice.value}
          onClick={() => onChange(choice.value)}
          className={`min-h-7 px-3 text-13 pointer-coarse:min-h-11 ${
            value === choice.value ? "bg-ink font-semibold text-leaf" : "text-quiet"
          }`}
        >
          {choice.name}
        </button>
      ))}
    </div>
  );
}

interface DownloadProps {
  /** The figure whose drawings are saved. */
  readonly figure: RefObject<HTMLElement | null>;
  /** Of the file, without ending. */
  readonly name: string;
  readonly waiting: boolean;
}

/** "Picture: SVG PNG", as the figure stands now. */
export function FigureDownload({ figure, name, waiting }: DownloadProps) {
  const save = (kind: "svg" | "png") => {
    if (figure.current) void downloadFigure(figure.current, fileName(name), kind);
  };
  return (
    <span className="ms-auto flex items-center gap-x-1 print-hidden">
      {(["svg", "png"] as const).map((kind) => (
        <button
          key={kind}
          type="button"
          disabled={waiting}
          aria-label={`Save the figure as ${kind.toUpperCase()}`}
          onClick={() => save(kind)}
          className="min-h-6 px-1.5 text-13 text-signal underline underline-offset-3 disabled:opacity-50 pointer-coarse:min-h-11"
        >
          {kind.toUpperCase()}
        </button>
      ))}
    </span>
  );
}

/** Letters, digits and hyphens, as every system takes them. */
const fileName = (name: string): string =>
  name
    .replaceAll("−", "-")
    .replace(/[^A-Za-z0-9.+-]+/g, "-")
    .replace(/^-+|-+$/g, "");
