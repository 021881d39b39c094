// What the history says of each entry.
import { expect, test } from "vitest";
import { whatHappened } from "~/components/rfq-history";

const said = (subject: string, action: string, detail: Record<string, unknown> = {}) =>
  whatHappened(
    { id: 1, at: "2027-01-01T00:00:00.000Z", actorName: null, company: null, subject, action, detail },
    "Europe/Berlin",
  );

test("entries are told in words, with instants in the RFQ's zone", () => {
  const dueAt = "2027-03-31T15:00:00.000Z";
  expect(said("rfq", "opened", { invitations: 1, dueAt })).toBe(
    "opened the RFQ to 1 supplier, due 31 Mar 2027 17:00 +02:00",
  );
  expect(said("rfq", "closed", { early: true, dueAt })).toBe(
    "closed the RFQ early; it was due 31 Mar 2027 17:00 +02:00",
  );
  expect(said("rfq", "closed", { dueAt })).toBe("closed the RFQ at its due date");
  expect(said("invitation", "sent", { company: "Orme Microwave", email: "sales@orme.example" })).toBe(
    "invited Orme Microwave (sales@orme.example)",
  );
});

test("an entry without a sentence of its own, or with a detail that is missing, is still told", () => {
  expect(said("clarification", "answered")).toBe("answered: clarification");
  expect(said("rfq", "cancelled")).toBe("cancelled the RFQ: ");
});
