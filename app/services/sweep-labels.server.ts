// Unit and temperature of a sweep as far as its file says them, by name or in a comment; what can be read two ways is left open.
import { COLDEST, HOTTEST } from "~/forms/measurement";

export interface SweepLabels {
  /** Serial of the unit, at most 60 characters. */
  readonly serial: string | null;
  /** °C, to a tenth. */
  readonly temperature: number | null;
}

/** "-30C", "+25 degC", "70.5 °C"; a hyphen right after a letter or digit may be a separator, so that its sign is not known. */
const NAMED_TEMPERATURE =
  /(?<before>^|[^0-9.+\-−]|[0-9.](?=[+\-−]))(?<sign>[+\-−]?)(?<figure>\d{1,3}(?:\.\d)?)[ _]?(?:deg|°|º)?[ _]?c(?![a-z0-9])/iu;
const COMMENTED_TEMPERATURE =
  /\btemp(?:erature|\.)? ?[:=]? ?(?<sign>[+\-−]?) ?(?<figure>\d{1,3}(?:\.\d)?) ?(?:deg|°|º)? ?c(?![a-z0-9])/iu;
const COMMENTED_SERIAL =
  /\b(?:serial(?: ?(?:no\.?|number|#))?|s\/n|unit(?: ?(?:no\.?|number|#))?) ?[:=#]? ?(?<serial>[\p{L}\p{N}][^\s,;]*)/iu;
const EXTENSION = /\.(?:s2p|ts)$/iu;
const LONGEST_SERIAL = 60;

/**
 * A comment that names the serial counts before the name. Where name and comments give different temperatures, none is taken.
 *
 * @param comments as the reader of the file returns them, without the leading "!"
 */
export function readSweepLabels(fileName: string, comments: readonly string[]): SweepLabels {
  const stem = fileName.replace(EXTENSION, "");
  const named = NAMED_TEMPERATURE.exec(stem);
  const commented = firstMatch(comments, COMMENTED_TEMPERATURE);
  return {
    serial: shortened(firstMatch(comments, COMMENTED_SERIAL)?.groups?.serial ?? serialOf(stem, named)),
    temperature: agreed(named && namedFigure(named, stem), commented && figureOf(commented)),
  };
}

/** White space as single spaces, so that no pattern tries its runs over and over; without characters that are not shown. */
const plainComment = (comment: string): string => comment.replace(/\s+/gu, " ").replace(/[\p{Cc}\p{Cf}]/gu, "");

function firstMatch(comments: readonly string[], pattern: RegExp): RegExpExecArray | null {
  for (const comment of comments) {
    const match = pattern.exec(plainComment(comment));
    if (match) return match;
  }
  return null;
}

/** What is left of the name without its temperature, if it has a digit: a serial does, "wide sweep" does not. */
function serialOf(stem: string, temperature: RegExpExecArray | null): string | null {
  const rest = temperature ? stem.slice(0, temperature.index + (temperature.groups?.before ?? "").length) : stem;
  const serial = rest.replace(/[\s_+.-]+$/u, "").replace(/^[\s_+.-]+/u, "");
  return /\d/.test(serial) ? serial : null;
}

const shortened = (serial: string | null): string | null =>
  serial === null || serial.length > LONGEST_SERIAL ? null : serial;

function namedFigure(match: RegExpExecArray, stem: string): number | null {
  const { before = "", sign = "" } = match.groups ?? {};
  const isSeparator = sign !== "" && sign !== "+" && /[\p{L}\p{N}]/u.test(before);
  return isSeparator || stem.length === 0 ? null : figureOf(match);
}

function figureOf(match: RegExpExecArray): number {
  const { sign = "", figure = "" } = match.groups ?? {};
  return (sign === "" || sign === "+" ? 1 : -1) * Number(figure);
}

function agreed(named: number | null, commented: number | null): number | null {
  if (named !== null && commented !== null && named !== commented) return null;
  const celsius = named ?? commented;
  return celsius === null || celsius < COLDEST || celsius > HOTTEST ? null : celsius;
}
