// A local date and time in a named zone, as a UTC instant: never guessed where the clocks change.
import { Temporal } from "temporal-polyfill";

export type ZonedTimeField = "date" | "time" | "zone";

export type ReadZonedTime =
  | { readonly ok: true; readonly instant: Date }
  | {
      readonly ok: false;
      readonly field: ZonedTimeField;
      readonly reason: string;
      /** Offsets to choose from where the time occurs twice: "+02:00", "+01:00". */
      readonly offsets?: readonly string[];
    };

export interface ZonedTimeText {
  /** "2026-11-27". */
  readonly date: string;
  /** "17:00". */
  readonly time: string;
  /** IANA name: "Europe/Berlin". */
  readonly zone: string;
  /** Says which one is meant where a time occurs twice; otherwise without effect. */
  readonly offset?: string;
}

const refuse = (field: ZonedTimeField, reason: string): ReadZonedTime => ({ ok: false, field, reason });

/** Reads date, time and zone. A time the clocks skip is refused, one that occurs twice asks for its offset. */
export function readZonedTime({ date, time, zone, offset }: ZonedTimeText): ReadZonedTime {
  if (!isTimeZone(zone)) return refuse("zone", "Choose a time zone by name, as Europe/Berlin.");
  if (!/^\d{4}-\d{2}-\d{2}$/.test(date)) return refuse("date", "Enter the date as year-month-day, 2027-03-31.");
  if (!/^\d{2}:\d{2}$/.test(time)) return refuse("time", "Enter the time as hours and minutes, 17:00.");
  if (!isDate(date)) return refuse("date", "This date is not in the calendar.");
  if (!/^([01]\d|2[0-3]):[0-5]\d$/.test(time)) return refuse("time", "A day has the times 00:00 to 23:59.");

  const local = Temporal.PlainDateTime.from(`${date}T${time}`);
  const early = local.toZonedDateTime(zone, { disambiguation: "earlier" });
  const late = local.toZonedDateTime(zone, { disambiguation: "later" });
  if (early.epochMilliseconds === late.epochMilliseconds)
    return { ok: true, instant: new Date(early.epochMilliseconds) };
  if (!early.toPlainDateTime().equals(local)) {
    const after = late.toPlainTime().toString({ smallestUnit: "minute" });
    const before = early.toPlainTime().toString({ smallestUnit: "minute" });
    return refuse("time", `The clocks change and skip ${time} on this date. Choose ${before} or ${after}.`);
  }
  const chosen = [early, late].find((candidate) => candidate.offset === offset);
  if (chosen) return { ok: true, instant: new Date(chosen.epochMilliseconds) };
  return {
    ...refuse("time", `${time} occurs twice on this date: at ${early.offset} and at ${late.offset}. Choose one.`),
    offsets: [early.offset, late.offset],
  } as ReadZonedTime;
}

/** The date and time of an instant in a zone, as the form's fields, with its offset. */
export function zonedTimeToText(instant: Date, zone: string): Required<ZonedTimeText> {
  const zoned = Temporal.Instant.fromEpochMilliseconds(instant.getTime()).toZonedDateTimeISO(zone);
  return {
    date: zoned.toPlainDate().toString(),
    time: zoned.toPlainTime().toString({ smallestUnit: "minute" }),
    zone,
    offset: zoned.offset,
  };
}

/** Whether a name is a zone of the time zone database; a bare offset is none, since it knows no clock change. */
export function isTimeZone(name: string): boolean {
  if (!/^[A-Za-z][A-Za-z0-9_+-]*(\/[A-Za-z0-9_+-]+){0,2}$/.test(name) || name.length > 64) return false;
  try {
    new Intl.DateTimeFormat("en", { timeZone: name });
    return true;
  } catch (error) {
    if (error instanceof RangeError) return false;
    throw error;
  }
}

/** Whether "2027-02-29" and the like is in the calendar. */
export function isDate(text: string): boolean {
  const match = /^(\d{4})-(\d{2})-(\d{2})$/.exec(text);
  if (!match) return false;
  const [, year, month, day] = match.map(Number);
  const date = new Date(Date.UTC(year ?? 0, (month ?? 0) - 1, day ?? 0));
  return date.getUTCMonth() + 1 === month && date.getUTCDate() === day;
}
