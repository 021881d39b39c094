// A quote's terms, setup and declarations as they are read at submission.
import { expect, test } from "vitest";
import { parseQuoteTerms, quoteTermsToValues } from "~/forms/quote-terms";

const context = { breaks: [500, 100], currency: "EUR", declaredLineKeys: ["power", "size"], today: "2026-11-27" };
const filled = {
  "prices.100": "48.50",
  "prices.500": "1,039.2000",
  nre: "0",
  leadFirstDays: "",
  leadVolumeDays: "70",
  validUntil: "2026-11-27",
  minimumQuantity: "",
  orderMultiple: "25",
  incoterms: "fca",
  place: "Halden",
  paymentTerms: "30 days net",
  remarks: "",
  basis: "measured",
  "setup.transmission": "0.08 dB",
  "instrument.analyser": "Two-port analyser",
  "drift.ppmPerKelvin": "±2 ppm/K",
  "declarations.power.answer": "comply",
  "declarations.size.answer": "exception",
  "declarations.size.text": "62 mm",
};
const parse = (changes: Record<string, string> = {}) => parseQuoteTerms({ ...filled, ...changes }, context);
const errorsOf = (changes: Record<string, string>) => {
  const parsed = parse(changes);
  return parsed.ok ? {} : parsed.errors;
};

test("filled fields become terms with exact decimal amounts in the RFQ's currency", () => {
  const parsed = parse();
  expect(parsed).toEqual({
    ok: true,
    value: {
      currency: "EUR",
      prices: [
        { quantity: 100, unitPrice: "48.5" },
        { quantity: 500, unitPrice: "1039.2" },
      ],
      nre: "0",
      leadFirstDays: null,
      leadVolumeDays: 70,
      validUntil: "2026-11-27",
      minimumQuantity: null,
      orderMultiple: 25,
      incoterms: "FCA",
      place: "Halden",
      paymentTerms: "30 days net",
      remarks: null,
      basis: "measured",
      setup: { transmission: 0.08 },
      instrument: { analyser: "Two-port analyser" },
      drift: { ppmPerKelvin: 2, either: true },
      declarations: [
        { lineKey: "power", answer: "comply", text: null },
        { lineKey: "size", answer: "exception", text: "62 mm" },
      ],
    },
  });
  if (parsed.ok) expect(parseQuoteTerms(quoteTermsToValues(parsed.value), context)).toEqual(parsed);
});

test("a price is above 0 with four decimals at most, and one break at least has one", () => {
  for (const wrong of ["0", "0.0000", "-1", "1.23456", "48,50", "1,234", "12 EUR", "1e3", "free", "123456789012345"]) {
    expect(errorsOf({ "prices.100": wrong })).toHaveProperty(["prices.100"]);
  }
  expect(parse({ "prices.500": "" })).toMatchObject({ ok: true, value: { prices: [{ quantity: 100 }] } });
  expect(errorsOf({ "prices.100": "", "prices.500": "" })).toEqual({
    "prices.100": ["Enter a unit price at one quantity at least."],
  });
  expect(parse({ "prices.7": "1" })).toMatchObject({
    ok: true,
    value: { prices: [{ quantity: 100 }, { quantity: 500 }] },
  });
  expect(parse({ "prices.100": "12345678901234.5678" })).toMatchObject({
    ok: true,
    value: { prices: [{ unitPrice: "12345678901234.5678" }, {}] },
  });
  expect(errorsOf({ nre: "" })).toHaveProperty("nre");
  expect(errorsOf({ nre: "-1" })).toHaveProperty("nre");
});

test("a validity that has passed or is not in the calendar is refused", () => {
  expect(errorsOf({ validUntil: "2026-11-26" })).toEqual({
    validUntil: ["The validity lies in the past. Choose a later date."],
  });
  for (const wrong of ["", "2027-02-30", "31.3.2027"])
    expect(errorsOf({ validUntil: wrong })).toHaveProperty("validUntil");
});

test("an Incoterms rule and its named place come together or not at all", () => {
  expect(errorsOf({ place: "" })).toEqual({ place: ["Name the place for FCA."] });
  expect(errorsOf({ incoterms: "" })).toHaveProperty("incoterms");
  expect(errorsOf({ incoterms: "DAT" })).toHaveProperty("incoterms");
  expect(parse({ incoterms: "", place: "" })).toMatchObject({ ok: true, value: { incoterms: null, place: null } });
});

test("each declared line is answered, an exception in words; lines nobody asked about are ignored", () => {
  expect(errorsOf({ "declarations.power.answer": "" })).toEqual({ "declarations.power.answer": [expect.anything()] });
  expect(errorsOf({ "declarations.size.text": " " })).toEqual({
    "declarations.size.text": ["Say what you offer instead."],
  });
  expect(parse({ "declarations.other.answer": "comply" })).toMatchObject({
    ok: true,
    value: { declarations: [{}, {}] },
  });
});

test("counts and choices are checked, setup fields may stay blank", () => {
  for (const field of ["leadFirstDays", "leadVolumeDays", "minimumQuantity", "orderMultiple"]) {
    expect(errorsOf({ [field]: "1.5" })).toHaveProperty(field);
  }
  expect(errorsOf({ leadVolumeDays: "" })).toHaveProperty("leadVolumeDays");
  expect(errorsOf({ basis: "guessed" })).toHaveProperty("basis");
  expect(errorsOf({ "setup.tracking": "0" })).toEqual({
    "setup.tracking": ["Enter a figure above 0, or leave the field blank."],
  });
  expect(parse({ "setup.transmission": "", "instrument.analyser": "", "drift.ppmPerKelvin": "" })).toMatchObject({
    ok: true,
    value: { setup: {}, instrument: {}, drift: null },
  });
  expect(errorsOf({ "drift.ppmPerKelvin": "warm", "instrument.calibratedOn": "2031-01-01" })).toEqual({
    "drift.ppmPerKelvin": [expect.any(String)],
    "instrument.calibratedOn": [expect.any(String)],
  });
});
