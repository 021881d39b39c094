// Addresses of the list of RFQs, and the time zones a form offers.
import { expect, test } from "vitest";
import { DEFAULT_RFQ_LIST, readPage, readRfqListQuery, rfqListSearch, type RfqListQuery } from "~/forms/rfq-list";
import { timeZones } from "~/forms/time-zones";
import { isTimeZone } from "~/forms/zoned-time";

const read = (search: string) => readRfqListQuery(new URLSearchParams(search));

test("an address without a query is the list of all, newest number first, and every view's address reads back", () => {
  expect(read("")).toEqual(DEFAULT_RFQ_LIST);
  expect(rfqListSearch(DEFAULT_RFQ_LIST)).toBe("");
  const views: RfqListQuery[] = [
    { state: "open", sort: "due", direction: "ascending", page: 1 },
    { state: null, sort: "number", direction: "ascending", page: 3 },
    { state: "cancelled", sort: "title", direction: "descending", page: 2 },
  ];
  for (const view of views) expect(read(rfqListSearch(view))).toEqual(view);
});

test("unknown words and pages in an address count as absent", () => {
  expect(read("?state=lost&sort=buyer_organisation_id&direction=up&page=-1")).toEqual({
    ...DEFAULT_RFQ_LIST,
    direction: "ascending",
  });
  for (const text of [null, "", "0", "1.5", "1e3", "９", "12345678"]) expect(readPage(text)).toBe(1);
  expect(readPage("17")).toBe(17);
});

test("every zone offered is one the due date's reader takes, once, with the one in use", () => {
  const zones = timeZones("Asia/Calcutta");
  expect(zones[0]).toBe("UTC");
  expect(zones).toContain("Asia/Calcutta");
  expect(zones).toContain("Europe/Berlin");
  expect(new Set(zones).size).toBe(zones.length);
  expect(zones.filter((zone) => !isTimeZone(zone))).toEqual([]);
});
