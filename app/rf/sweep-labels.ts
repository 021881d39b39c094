// Unit and temperature of a sweep as far as its file says them, by name or in a comment; what can be read two ways is left open.

/** °C: what lies beyond is no temperature of a measurement. */
export const COLDEST = -270;
export const HOTTEST = 500;

export interface SweepLabels {
  /** Serial of the unit, at most 60 characters. */
  readonly serial: string | null;
  /** °C, to a tenth. */
  readonly temperature: number | null;
}

/**
 * "-30C", "+25 degC", "70.5 °C". What stands before decides how it is read: a letter ("m40C" is minus 40 to some, "S21_C" no temperature at
 * all) or a dash that may part serial and figure leaves it open.
 */
const NAMED_TEMPERATURE =
  /(?<before>^|[^0-9.+\-−‐-—]|[0-9.](?=[+\-−‐-—]))(?<sign>[+\-−‐-—]?)(?<figure>\d{1,3}(?:\.\d)?)[ _]?(?:deg|°|º)?[ _]?c(?![a-z0-9])/giu;
/** A dash apart from the figure, or a word for minus: "SN12 - 30C", "minus_30C". */
const DOUBTFUL_SIGN = /(?:[-−‐-—][\s_]+|(?:^|[^\p{L}])(?:m|n|minus|neg|negative)[\s_]+)$/iu;
const COMMENTED_TEMPERATURE =
  /\btemp(?:erature|\.)?(?<mark> ?[:=])?(?<gap> ?)(?<sign>[+\-−‐-—]?)(?<apart> ?)(?<figure>\d{1,3}(?:\.\d)?) ?(?:deg|°|º)? ?c(?![a-z0-9])/giu;
/** A serial has a digit: "units: MHz" and "unit under test" name none. */
const COMMENTED_SERIAL =
  /\b(?:serial(?: ?(?:no\.?|number|#))?|s\/n|unit(?: ?(?:no\.?|number|#))?)(?!\p{L}) ?[:=#]? ?(?<serial>(?=[^\s,;]*\d)[\p{L}\p{N}][^\s,;]*)/iu;
const EXTENSION = /\.(?:s2p|ts)$/iu;
const LONGEST_SERIAL = 60;

/**
 * A comment that names the serial counts before the name. Where name and comments give different temperatures, none is taken.
 *
 * @param comments as the reader of the file returns them, without the leading "!"
 */
export function readSweepLabels(fileName: string, comments: readonly string[]): SweepLabels {
  const stem = withoutUnshown(fileName).replace(EXTENSION, "");
  const named = namedTemperatures(stem);
  const plain = comments.map(plainComment);
  return {
    serial: shortened(commentedSerial(plain) ?? serialOf(stem, named)),
    temperature: agreed([...named, ...commentedTemperatures(plain)]),
  };
}

/** A temperature that is written down; null where it can be read two ways. */
interface Written {
  readonly celsius: number | null;
  /** Where its figure begins, with the sign. */
  readonly at: number;
}

/** White space as single spaces, so that no pattern tries its runs over and over; without characters that are not shown. */
const plainComment = (comment: string): string => withoutUnshown(comment.replace(/\s+/gu, " "));

const withoutUnshown = (text: string): string => text.replace(/[\p{Cc}\p{Cf}]/gu, "");

function commentedSerial(comments: readonly string[]): string | undefined {
  for (const comment of comments) {
    const match = COMMENTED_SERIAL.exec(comment);
    if (match) return match.groups?.serial;
  }
  return undefined;
}

/** What is left of the name before its temperature, if it has a digit: a serial does, "wide sweep" does not. */
function serialOf(stem: string, named: readonly Written[]): string | null {
  const temperature = named.find(({ celsius }) => celsius !== null) ?? named[0];
  const isOpen = temperature?.celsius === null;
  const rest = stem.slice(0, temperature?.at).replace(isOpen ? /(?<=[\s_+.-])\p{L}*[\s_+.-]*$/u : /$/u, "");
  const serial = rest.replace(/[\s_+.-]+$/u, "").replace(/^[\s_+.-]+/u, "");
  return /\d/.test(serial) ? serial : null;
}

const shortened = (serial: string | null): string | null =>
  serial === null || serial.length > LONGEST_SERIAL ? null : serial;

function namedTemperatures(stem: string): Written[] {
  return [...stem.matchAll(NAMED_TEMPERATURE)].map((match) => {
    const { before = "", sign = "" } = match.groups ?? {};
    const at = match.index + before.length;
    const isClear = sign === "+" || !/[\p{L}\p{N}]/u.test(before);
    return { at, celsius: isClear && !DOUBTFUL_SIGN.test(stem.slice(0, at)) ? figureOf(match) : null };
  });
}

/** After a bare word a dash may be its own or the figure's: "temp -30 C" is minus 30, "temp - 30 C" and "temp-30 C" are open. */
function commentedTemperatures(comments: readonly string[]): Written[] {
  const matches = comments.flatMap((comment) => [...comment.matchAll(COMMENTED_TEMPERATURE)]);
  return matches.map((match) => {
    const { mark, gap, sign, apart } = match.groups ?? {};
    const isClear = sign === "" || sign === "+" || mark !== undefined || (gap === " " && apart === "");
    return { at: match.index, celsius: isClear ? figureOf(match) : null };
  });
}

function figureOf(match: RegExpExecArray): number {
  const { sign = "", figure = "" } = match.groups ?? {};
  return (sign === "" || sign === "+" ? 1 : -1) * Number(figure);
}

/** The one temperature that all who are clear give. */
function agreed(written: readonly Written[]): number | null {
  const clear = new Set(written.flatMap(({ celsius }) => (celsius === null ? [] : [celsius])));
  const [celsius = null] = clear.size === 1 ? clear : [];
  return celsius === null || celsius < COLDEST || celsius > HOTTEST ? null : celsius;
}
