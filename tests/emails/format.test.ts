// Proves how mails state times, and what they take out of other people's words.
import { expect, test } from "vitest";
import { formatInstant, singleLine, visibleText } from "~/emails/format";

// Local times by GNU date and the system's tz database, for example:
//   TZ=Asia/Kolkata LC_ALL=C date -d 2026-12-31T20:00:00Z '+%-d %b %Y %H:%M:%S %:z'
test.each([
  ["Europe/Berlin", "2026-11-27T16:00:00Z", "27 Nov 2026 17:00 +01:00 (16:00 UTC)"],
  ["America/New_York", "2026-11-01T05:30:00Z", "1 Nov 2026 01:30 -04:00 (05:30 UTC)"],
  ["America/New_York", "2026-11-01T06:30:00Z", "1 Nov 2026 01:30 -05:00 (06:30 UTC)"],
  ["Asia/Kolkata", "2026-12-31T20:00:00Z", "1 Jan 2027 01:30 +05:30 (31 Dec 2026 20:00 UTC)"],
  ["America/St_Johns", "2027-01-01T02:15:09Z", "31 Dec 2026 22:45:09 -03:30 (1 Jan 2027 02:15:09 UTC)"],
  ["Asia/Tokyo", "2026-09-30T15:00:00Z", "1 Oct 2026 00:00 +09:00 (30 Sep 2026 15:00 UTC)"],
])("in %s the instant %s reads %s", (zone, instant, expected) => {
  expect(formatInstant(instant, zone)).toBe(expected);
});

test("an instant in a zone without offset is given once, and milliseconds never round it up", () => {
  expect(formatInstant("2026-11-27T15:59:59.999Z", "Europe/London")).toBe("27 Nov 2026 15:59:59 UTC");
});

test("an unknown zone or an instant without offset is refused", () => {
  expect(() => formatInstant("2026-11-27T16:00:00Z", "Europe/Atlantis")).toThrow(RangeError);
  expect(() => formatInstant("2026-11-27T16:00:00", "Europe/Berlin")).toThrow(RangeError);
});

test("control characters, zero-width characters and direction overrides vanish; lines stay lines or become one", () => {
  expect(visibleText("a\u0000b\u202Ec\u200Bd\r\ne\u001B[31m")).toBe("abcd\ne[31m");
  expect(singleLine(" one\r\n\ttwo \u2028 three ")).toBe("one two three");
});
