// The forms of a decision and of an organisation.
import { expect, test } from "vitest";
import { parseDecisionForm, parseRecommendationForm } from "~/forms/decision";
import { parseColleagueForm, parseOrganisationForm } from "~/forms/organisation";

const quoteId = "abcdefghijkmnpqr";

test("a recommendation names a quote and gives a reason of twenty characters or more", () => {
  const reason = "Conforms, least cost";
  expect(reason).toHaveLength(20);
  expect(parseRecommendationForm({ quoteId, reason: ` ${reason} ` })).toEqual({ ok: true, value: { quoteId, reason } });
  expect(parseRecommendationForm({ quoteId, reason: reason.slice(1) })).toMatchObject({
    errors: { reason: [expect.anything()] },
  });
  expect(parseRecommendationForm({ quoteId: "1", reason })).toMatchObject({
    errors: { quoteId: ["Choose the quote to award."] },
  });
  expect(parseRecommendationForm({ reason })).toMatchObject({ errors: { quoteId: ["Choose the quote to award."] } });
});

test("an approval needs no remark, a return says what should change", () => {
  const decisionId = quoteId;
  expect(parseDecisionForm({ intent: "approve", decisionId })).toEqual({
    ok: true,
    value: { intent: "approve", decisionId, remark: "" },
  });
  expect(parseDecisionForm({ intent: "return", decisionId, remark: "no" })).toMatchObject({
    errors: { remark: [expect.anything()] },
  });
  expect(parseDecisionForm({ intent: "return", decisionId, remark: "Ask for samples first." })).toMatchObject({
    ok: true,
  });
  expect(parseDecisionForm({ intent: "award", decisionId })).toMatchObject({ errors: { intent: [expect.anything()] } });
});

test("an organisation's settings: zone and currency by their names, the box absent when not ticked", () => {
  const settings = { name: "Northgale Radio", timeZone: "Europe/Berlin", currency: "eur", decisionRule: "guarded" };
  expect(parseOrganisationForm(settings)).toEqual({
    ok: true,
    value: { ...settings, currency: "EUR", secondPerson: false },
  });
  expect(parseOrganisationForm({ ...settings, secondPerson: "on" })).toMatchObject({
    ok: true,
    value: { secondPerson: true },
  });
  expect(parseOrganisationForm({ ...settings, timeZone: "Berlin", currency: "EURO" })).toMatchObject({
    errors: { timeZone: [expect.anything()], currency: [expect.anything()] },
  });
});

test("a colleague gets a buyer's role, never the supplier's", () => {
  expect(parseColleagueForm({ email: "a@b.example", name: "Ada", role: "purchasing" })).toMatchObject({ ok: true });
  expect(parseColleagueForm({ email: "a@b.example", name: "Ada", role: "supplier" })).toMatchObject({
    errors: { role: ["Choose a role."] },
  });
});
