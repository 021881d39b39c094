// The comparison: its arithmetic, written by hand; its order; and what stands apart.
import { expect, test } from "vitest";
import { QuoteLineResult, Supplier } from "~/db/models";
import { SYSTEM } from "~/db/scoping";
import { DEFAULT_COMPARISON, readComparisonQuery } from "~/forms/comparison";
import { readComparison } from "~/services/comparison.server";
import { buildInvitation, buildOrganisation, buildPerson, buildRfq, SHORT_LINES } from "../support/factories";
import { buildSubmittedQuote, storeScore } from "../support/scored-quote";
import { useDatabase } from "../support/database";

useDatabase();

const passes = { margin: 0.3, credited: 1.5, verdict: "pass" } as const;
const fails = { margin: -0.12, credited: -0.6, verdict: "fail" } as const;

async function openRfq() {
  const buyer = await buildOrganisation("buyer");
  const engineer = await buildPerson(buyer);
  return { engineer, ...(await buildRfq(engineer)) };
}

test("cost at the asked quantity is the bought quantity times its break, with NRE: 520 × 121.00 + 4,000 = 66,920", async () => {
  const { engineer, rfq } = await openRfq();
  // 500 asked, sold by 40: 500 / 40 = 12.5, so 13 × 40 = 520; its break is 500 at 121.00. At 1,000: 25 × 40 = 1,000 at 110.
  const { version } = await buildSubmittedQuote(rfq, SHORT_LINES, { orderMultiple: 40 });
  await storeScore(version, SHORT_LINES, { lineloss: passes }, true);
  const asked = await readComparison(engineer, rfq.publicId, DEFAULT_COMPARISON);
  expect(asked?.conforming[0]?.cost).toMatchObject({
    boughtQuantity: 520,
    unitPrice: "121",
    goods: "62920",
    nre: "4000",
    total: "66920",
  });
  const more = await readComparison(engineer, rfq.publicId, { ...DEFAULT_COMPARISON, quantity: 1000 });
  expect(more?.quantity).toBe(1000);
  expect(more?.conforming[0]?.cost?.total).toBe("114000");
});

test("a quantity that is not among the breaks is compared at the asked one, and a quote without a price for it has none", async () => {
  const { engineer, rfq } = await openRfq();
  const { version } = await buildSubmittedQuote(rfq, SHORT_LINES, { prices: { 1000: "110" } });
  await storeScore(version, SHORT_LINES, { lineloss: passes }, true);
  const comparison = await readComparison(engineer, rfq.publicId, { ...DEFAULT_COMPARISON, quantity: 777 });
  expect(comparison?.quantity).toBe(500);
  expect(comparison?.quantities).toEqual([100, 500, 1000]);
  expect(comparison?.conforming[0]?.cost).toBeNull();
});

test("conforming quotes come by cost, nonconforming ones stand apart however cheap, unscored ones say so", async () => {
  const { engineer, rfq } = await openRfq();
  const dear = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Dear", prices: { 500: "186" } });
  await storeScore(dear.version, SHORT_LINES, { lineloss: passes }, true);
  const fair = await buildSubmittedQuote(rfq, SHORT_LINES, {
    name: "Fair",
    prices: { 500: "121" },
    leadVolumeDays: 98,
  });
  await storeScore(fair.version, SHORT_LINES, { lineloss: passes }, true);
  const cheap = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Cheap", prices: { 500: "94" } });
  await storeScore(cheap.version, SHORT_LINES, { lineloss: fails }, false);
  await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Late" });

  const byCost = await readComparison(engineer, rfq.publicId, DEFAULT_COMPARISON);
  expect(byCost?.conforming.map(({ supplierName }) => supplierName)).toEqual(["Fair", "Dear"]);
  expect(byCost?.nonconforming.map(({ supplierName }) => supplierName)).toEqual(["Cheap"]);
  expect(byCost?.unscored.map(({ supplierName }) => supplierName)).toEqual(["Late"]);
  const byLead = await readComparison(engineer, rfq.publicId, readComparisonQuery(new URLSearchParams("sort=lead")));
  expect(byLead?.conforming.map(({ supplierName }) => supplierName)).toEqual(["Dear", "Fair"]);
  const turned = readComparisonQuery(new URLSearchParams("sort=cost&direction=descending"));
  const byCostTurned = await readComparison(engineer, rfq.publicId, turned);
  expect(byCostTurned?.conforming.map(({ supplierName }) => supplierName)).toEqual(["Dear", "Fair"]);
});

test("the worst line is told with margin, interval, place and credited margin; exceptions are counted", async () => {
  const { engineer, rfq } = await openRfq();
  const { version } = await buildSubmittedQuote(rfq, SHORT_LINES, { exceptions: ["linepower"] });
  await storeScore(
    version,
    SHORT_LINES,
    { lineloss: fails, linerej1: { ...passes, margin: 4, credited: 4 / 3 } },
    false,
  );
  const quote = (await readComparison(engineer, rfq.publicId, DEFAULT_COMPARISON))?.nonconforming[0];
  expect(quote?.worst).toMatchObject({
    lineNumber: "2.1",
    kind: "insertion-loss",
    verdict: "fail",
    margin: -0.12,
    creditedMargin: -0.6,
    frequency: 1.98e9,
    unit: "U-1",
    celsius: 70,
  });
  expect(quote?.worst?.marginInterval[0]).toBeCloseTo(-0.22, 12);
  expect(quote?.exceptions).toBe(1);
  // The declared line has no margin and is not on the strip.
  expect(quote?.margins.map(({ lineNumber, credited }) => [lineNumber, credited])).toEqual([
    ["2.1", -0.6],
    ["3.1", 4 / 3],
  ]);
});

test("suppliers without a quote are listed by their answer, and a withdrawn quote is not compared", async () => {
  const { engineer, rfq } = await openRfq();
  const { quote } = await buildSubmittedQuote(rfq, SHORT_LINES, { name: "Went" });
  await quote.update({ state: "withdrawn" });
  const accepted = await buildInvitation(rfq, await buildOrganisation("supplier", { name: "Accepted" }));
  const declined = await buildInvitation(rfq, await buildOrganisation("supplier", { name: "Declined" }));
  await declined.invitation.update({ state: "declined", reason: "No capacity", declinedAt: new Date() });
  const revoked = await buildInvitation(rfq, await buildOrganisation("supplier", { name: "Revoked" }));
  await revoked.invitation.update({ state: "revoked" });
  expect(await Supplier.count({ where: { id: accepted.supplier.id }, actor: SYSTEM })).toBe(1);
  const comparison = await readComparison(engineer, rfq.publicId, DEFAULT_COMPARISON);
  expect(comparison?.silent).toEqual([
    { company: "Accepted", state: "accepted" },
    { company: "Declined", state: "declined" },
    { company: "Went", state: "withdrawn" },
  ]);
  expect(comparison?.conforming).toEqual([]);
});

test("neither another buyer nor an invited supplier sees the comparison", async () => {
  const { rfq } = await openRfq();
  const { person } = await buildSubmittedQuote(rfq, SHORT_LINES);
  const stranger = await buildPerson(await buildOrganisation("buyer"), "admin");
  expect(await readComparison(stranger, rfq.publicId, DEFAULT_COMPARISON)).toBeNull();
  expect(await readComparison(person, rfq.publicId, DEFAULT_COMPARISON)).toBeNull();
});

test("a margin without end is no zero: by margin that quote comes last, and its strip shows the line as the least", async () => {
  const { engineer, rfq } = await openRfq();
  for (const [name, credited] of [
    ["Slight", -0.6],
    ["Endless", -9],
    ["Near", 0.2],
  ] as const) {
    const { version } = await buildSubmittedQuote(rfq, SHORT_LINES, { name });
    await storeScore(version, SHORT_LINES, { lineloss: { ...fails, credited } }, false);
    if (name !== "Endless") continue;
    const row = await QuoteLineResult.findOne({
      where: { versionId: version.id, lineKey: "lineloss" },
      actor: SYSTEM,
      rejectOnEmpty: true,
    });
    const cells = row.cells.map((cell) => ({ ...cell, result: { ...cell.result, margin: "-inf" as const } }));
    await row.update({ margin: null, creditedMargin: null, cells });
  }
  const byMargin = readComparisonQuery(new URLSearchParams("sort=margin&direction=ascending"));
  const quotes = (await readComparison(engineer, rfq.publicId, byMargin))?.nonconforming;
  expect(quotes?.map(({ supplierName }) => supplierName)).toEqual(["Slight", "Near", "Endless"]);
  expect(quotes?.[2]?.margins.map(({ credited }) => credited)).toEqual([-Infinity]);
});
