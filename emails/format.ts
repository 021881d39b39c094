// Times and texts of mails: instants with offset and UTC, words made safe to set in one line.
import { Temporal } from "temporal-polyfill";

const MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];

/**
 * An instant in a zone, with its offset and the same instant in UTC; seconds only where they are not zero.
 *
 * @param instant ISO 8601 with Z or offset
 * @param timeZone IANA name
 * @returns "27 Nov 2026 17:00 +01:00 (16:00 UTC)"; the UTC date too where it differs
 * @throws RangeError if the instant or the zone cannot be read
 */
export function formatInstant(instant: string, timeZone: string): string {
  const local = Temporal.Instant.from(instant).toZonedDateTimeISO(timeZone);
  const utc = local.withTimeZone("UTC");
  if (local.offsetNanoseconds === 0) return `${date(local)} ${time(local)} UTC`;
  const sameDay = local.toPlainDate().equals(utc.toPlainDate());
  return `${date(local)} ${time(local)} ${local.offset} (${sameDay ? "" : `${date(utc)} `}${time(utc)} UTC)`;
}

function date(moment: Temporal.ZonedDateTime): string {
  return `${moment.day} ${MONTHS[moment.month - 1]} ${moment.year}`;
}

function time(moment: Temporal.ZonedDateTime): string {
  const twoDigits = (value: number) => String(value).padStart(2, "0");
  const minutes = `${twoDigits(moment.hour)}:${twoDigits(moment.minute)}`;
  return moment.second === 0 ? minutes : `${minutes}:${twoDigits(moment.second)}`;
}

// Control characters but tab and line feed; zero-width spaces; and the marks that make text run backwards over its neighbours.
// eslint's no-control-regex is met by building the class from escapes in a string.
const UNSEEN = new RegExp(
  "[\\u0000-\\u0008\\u000B-\\u001F\\u007F-\\u009F\\u200B\\u2060\\uFEFF\\u202A-\\u202E\\u2066-\\u2069]",
  "g",
);

/** Text of several lines without control, zero-width and direction-override characters. */
export function visibleText(text: string): string {
  return text.replace(/\r\n?/g, "\n").replace(UNSEEN, "").trim();
}

/** The same in one line: runs of white space become one space. */
export function singleLine(text: string): string {
  return visibleText(text).replace(/\s+/g, " ");
}
