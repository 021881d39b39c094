// Why a Touchstone file is refused: one closed list of reasons, each with its place and its remedy.

export type TouchstoneErrorCode =
  | "empty-file"
  | "too-large"
  | "too-many-points"
  | "not-text"
  | "not-touchstone"
  | "no-data"
  | "option-line-late"
  | "option-token"
  | "option-repeated"
  | "reference-impedance"
  | "keyword-without-version"
  | "unknown-version"
  | "unknown-keyword"
  | "keyword-order"
  | "keyword-repeated"
  | "keyword-argument"
  | "keyword-missing"
  | "information-open"
  | "after-end"
  | "not-two-port"
  | "mixed-mode"
  | "bad-number"
  | "not-finite"
  | "decimal-comma"
  | "set-incomplete"
  | "set-layout"
  | "frequency-count"
  | "frequency-order"
  | "frequency-repeated"
  | "frequency-negative"
  | "noise-layout"
  | "noise-count"
  | "no-scattering";

/** A file that cannot be read. `message` says what was found and what to do; it does not repeat the line. */
export class TouchstoneError extends Error {
  override readonly name = "TouchstoneError";
  readonly code: TouchstoneErrorCode;
  /** 1-based. */
  readonly line: number;
  /** 1-based, in bytes of the line as read. */
  readonly column?: number;

  constructor(code: TouchstoneErrorCode, line: number, message: string, column?: number) {
    super(message);
    this.code = code;
    this.line = line;
    if (column !== undefined) this.column = column;
  }
}
