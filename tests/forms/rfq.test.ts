// The RFQ form: quantities, due dates across clock changes, the assumed setup, invitations.
import { expect, test } from "vitest";
import { parseInvitationForm, parseRfqForm, rfqToValues } from "~/forms/rfq";
import { readZonedTime } from "~/forms/zoned-time";

const now = new Date("2026-11-01T00:00:00Z");
const filled = {
  title: "Transmit band-pass, 500 pieces",
  "breaks.0": "500",
  "breaks.1": "100",
  "breaks.2": "",
  askedQuantity: "500",
  dueDate: "2026-11-27",
  dueTime: "17:00",
  dueZone: "Europe/Berlin",
  decisionRule: "simple",
  currency: "eur",
  text: "Line one\r\nline two",
  "invitations.0.company": "Halden Resonator Works",
  "invitations.0.email": "Quotes@Halden.example",
  "invitations.1.company": "",
  "invitations.1.email": "",
};
const parse = (changes: Record<string, string> = {}) => parseRfqForm({ ...filled, ...changes }, { now });
const errorsOf = (changes: Record<string, string>) => {
  const parsed = parse(changes);
  return parsed.ok ? {} : parsed.errors;
};

test("a filled form becomes an RFQ with its due date in UTC and the proposed setup", () => {
  const parsed = parse();
  expect(parsed).toEqual({
    ok: true,
    value: {
      title: "Transmit band-pass, 500 pieces",
      breaks: [100, 500],
      askedQuantity: 500,
      // Berlin keeps +01:00 in November.
      dueAt: new Date("2026-11-27T16:00:00Z"),
      dueZone: "Europe/Berlin",
      decisionRule: "simple",
      currency: "EUR",
      text: "Line one\nline two",
      unitsAsked: 3,
      unitsOverRange: 1,
      measurementPlan: {},
      assumedSetup: {
        transmission: 0.1,
        directivity: 36,
        sourceMatch: 32,
        loadMatch: 36,
        tracking: 0.1,
        noiseFloor: 90,
        noiseFloorKind: "peak",
      },
      invitations: [{ company: "Halden Resonator Works", email: "quotes@halden.example" }],
    },
  });
  if (parsed.ok) expect(parseRfqForm(rfqToValues(parsed.value), { now })).toEqual(parsed);
});

test("quantities are whole, each once, six at most, the asked one among them", () => {
  expect(errorsOf({ "breaks.1": "500" })).toEqual({ "breaks.1": ["500 is listed twice."] });
  expect(errorsOf({ "breaks.1": "1,000" })).toEqual({ "breaks.1": ["Write a whole number without marks: 1000."] });
  for (const wrong of ["0", "-5", "1.5", "ten", "10000001"])
    expect(errorsOf({ "breaks.1": wrong })).toHaveProperty(["breaks.1"]);
  expect(errorsOf({ askedQuantity: "250" })).toHaveProperty("askedQuantity");
  expect(errorsOf({ "breaks.0": "", "breaks.1": "" })).toHaveProperty(["breaks.0"]);
  const seven = Object.fromEntries(
    [1, 2, 3, 4, 5, 6, 500].map((quantity, index) => [`breaks.${index}`, String(quantity)]),
  );
  expect(errorsOf(seven)).toEqual({ "breaks.6": ["At most 6 quantities."], askedQuantity: [expect.anything()] });
});

test("a due date in the past, at this instant or not in the calendar is refused", () => {
  expect(errorsOf({ dueDate: "2026-10-31" })).toEqual({
    dueDate: ["The due date lies in the past. Choose a later one."],
  });
  expect(parseRfqForm(filled, { now: new Date("2026-11-27T16:00:00Z") }).ok).toBe(false);
  expect(parseRfqForm(filled, { now: new Date("2026-11-27T15:59:59.999Z") }).ok).toBe(true);
  expect(errorsOf({ dueDate: "2027-02-29" })).toHaveProperty("dueDate");
  expect(errorsOf({ dueDate: "27.11.2026" })).toHaveProperty("dueDate");
  expect(errorsOf({ dueTime: "24:00" })).toHaveProperty("dueTime");
  for (const zone of ["+01:00", "Europe/Nowhere", ""]) expect(errorsOf({ dueZone: zone })).toHaveProperty("dueZone");
});

test("a time the clocks skip is refused with the times on either side", () => {
  // European Union, Directive 2000/84/EC: clocks go from 02:00 to 03:00 at 01:00 UTC on the last Sunday of March.
  expect(errorsOf({ dueDate: "2027-03-28", dueTime: "02:30" })).toEqual({
    dueTime: ["The clocks change and skip 02:30 on this date. Choose 01:30 or 03:30."],
  });
});

test("a time that occurs twice is asked for its offset, and taken with it", () => {
  // The same directive: back from 03:00 to 02:00 at 01:00 UTC on the last Sunday of October.
  const twice = { dueDate: "2027-10-31", dueTime: "02:30" };
  expect(errorsOf(twice)).toEqual({
    dueTime: ["02:30 occurs twice on this date: at +02:00 and at +01:00. Choose one."],
    dueOffset: ["Choose +02:00 or +01:00."],
  });
  expect(parse({ ...twice, dueOffset: "+02:00" })).toMatchObject({
    ok: true,
    value: { dueAt: new Date("2027-10-31T00:30:00Z") },
  });
  const winter = parse({ ...twice, dueOffset: "+01:00" });
  expect(winter).toMatchObject({ ok: true, value: { dueAt: new Date("2027-10-31T01:30:00Z") } });
  if (winter.ok) expect(parseRfqForm(rfqToValues(winter.value), { now })).toEqual(winter);
  expect(errorsOf({ ...twice, dueOffset: "+05:00" })).toHaveProperty("dueTime");
});

test("zones far from Greenwich and with half hours come to the right instant", () => {
  const instant = (zone: string) => {
    const read = readZonedTime({ date: "2026-11-27", time: "17:00", zone });
    return read.ok ? read.instant.toISOString() : read.reason;
  };
  expect(instant("UTC")).toBe("2026-11-27T17:00:00.000Z");
  expect(instant("Asia/Kolkata")).toBe("2026-11-27T11:30:00.000Z");
  expect(instant("Pacific/Kiritimati")).toBe("2026-11-27T03:00:00.000Z");
  expect(instant("America/Argentina/Buenos_Aires")).toBe("2026-11-27T20:00:00.000Z");
});

test("the assumed setup has a figure wherever silence would count as no uncertainty", () => {
  expect(errorsOf({ "setup.transmission": "" })).toEqual({
    "setup.transmission": ["Enter a figure; 0.1 dB is usual."],
  });
  expect(errorsOf({ "setup.directivity": "-36" })).toHaveProperty(["setup.directivity"]);
  expect(errorsOf({ "setup.noiseFloor": "500" })).toHaveProperty(["setup.noiseFloor"]);
  expect(errorsOf({ "setup.noiseFloorKind": "mean" })).toHaveProperty(["setup.noiseFloorKind"]);
  expect(parse({ "setup.groupDelay": "0.2", "setup.noiseFloorKind": "rms" })).toMatchObject({
    ok: true,
    value: { assumedSetup: { groupDelay: 2e-10, noiseFloorKind: "rms", transmission: 0.1 } },
  });
});

test("choices and counts outside their lists are refused", () => {
  expect(errorsOf({ decisionRule: "generous" })).toEqual({ decisionRule: ["Choose the decision rule."] });
  expect(errorsOf({ currency: "DEM" })).toHaveProperty("currency");
  expect(errorsOf({ unitsAsked: "2", unitsOverRange: "3" })).toHaveProperty("unitsOverRange");
  expect(errorsOf({ unitsAsked: "0" })).toEqual({ unitsAsked: ["Give 1 to 100 units."] });
});

test("an invitation goes to one plain address, each company and address once", () => {
  const wrong = [
    "a@b.example, c@d.example",
    "Ada <a@b.example>",
    "a@b",
    "a@b.example\nBcc: c@d.example",
    "a b@c.example",
    "@c.example",
    "a@-c.example",
    "",
  ];
  for (const email of wrong)
    expect(parseInvitationForm({ company: "Works", email })).toMatchObject({
      ok: false,
      errors: { email: [expect.anything()] },
    });
  for (const email of ["a.b+c@d.example", "o'neil@sub.d-e.test"])
    expect(parseInvitationForm({ company: "Works", email }).ok).toBe(true);
  expect(
    errorsOf({ "invitations.1.company": "halden resonator works", "invitations.1.email": "QUOTES@halden.example" }),
  ).toEqual({
    "invitations.1.company": ["This company is listed twice."],
    "invitations.1.email": ["This address is listed twice."],
  });
  expect(errorsOf({ "invitations.1.email": "a@b.example" })).toEqual({
    "invitations.1.company": ["Enter the company's name."],
  });
});
