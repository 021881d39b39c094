// One event of every mail, between invented parties.
import type { MailEvent, ResultLine } from "~/emails/index";

export const results: ResultLine[] = [
  {
    line: "2.1",
    requirement: "Insertion loss, max 0.95 dB, 1.9200 to 1.9800 GHz",
    value: "1.012 dB",
    frequency: "1.9800 GHz",
    margin: "\u22120.062 dB",
    verdict: "fail",
  },
  {
    line: "2.2",
    requirement: "Ripple, max 0.60 dB p-p",
    value: "0.43 dB",
    frequency: "1.9800 GHz",
    margin: "+0.17 dB",
    verdict: "pass",
  },
  {
    line: "3.3",
    requirement: "Rejection, min 34.5 dB",
    value: "34.52 dB",
    frequency: "2.0050 GHz",
    margin: "+0.02 dB",
    verdict: "conditional-pass",
  },
  {
    line: "4.1",
    requirement: "Return loss, port 1, min 16 dB",
    value: "15.9 dB",
    frequency: "1.9214 GHz",
    margin: "\u22120.1 dB",
    verdict: "conditional-fail",
  },
  { line: "4.2", requirement: "Return loss, port 2, min 16 dB", verdict: "not-covered" },
  { line: "6.1", requirement: "Input power, min 20 W", value: "25 W", verdict: "declared" },
  { line: "6.2", requirement: "Connectors, SMA female", value: "SMA male at port 2", verdict: "exception" },
];

const rfq = { rfqNumber: "RFQ-2026-0117", rfqTitle: "1.95 GHz bandpass filter, mast head" };
const buyerName = "Northgale Radio";
const supplierName = "Tolvane Filters";
const due = { dueAt: "2026-11-27T16:00:00.000Z", dueZone: "Europe/Berlin" };
const origin = "https://tenderband.example";

export const samples: MailEvent[] = [
  {
    template: "invitation",
    props: {
      ...rfq,
      ...due,
      buyerName,
      message: "Please quote samples separately.\nTwo units over temperature are enough.",
      link: `${origin}/invitations/accept?token=4kq2mX9vTz7pLc3b`,
      linkValidUntil: "2026-11-27T16:00:00.000Z",
    },
  },
  {
    template: "quote-received-supplier",
    props: {
      ...rfq,
      ...due,
      buyerName,
      version: 2,
      receipt: "SHA-256 9f2c41d07be6",
      submittedAt: "2026-11-26T14:41:07.250Z",
      outcome: "fail; does not comply under simple acceptance",
      results,
      link: `${origin}/quotes/b7Qm2xV9kLp4Zt6c`,
    },
  },
  {
    template: "quote-received-buyer",
    props: {
      ...rfq,
      ...due,
      supplierName,
      version: 2,
      submittedAt: "2026-11-26T14:41:07.250Z",
      outcome: "fail; does not comply under simple acceptance",
      results,
      link: `${origin}/quotes/b7Qm2xV9kLp4Zt6c`,
    },
  },
  {
    template: "award-recommended",
    props: {
      ...rfq,
      supplierName,
      version: 2,
      amount: "48,200.00 EUR for 500 pieces",
      recommendedBy: "R. Amsel",
      reason: "Complies on all units at all temperatures.\nLead time is two weeks longer, which the schedule bears.",
      link: `${origin}/rfqs/c3Tn8wK5yHd1Rf7j/decision`,
    },
  },
  {
    template: "award-returned",
    props: {
      ...rfq,
      supplierName,
      returnedBy: "J. Weller",
      remark: "Please state how the validity of 30 days is met.",
      link: `${origin}/rfqs/c3Tn8wK5yHd1Rf7j/decision`,
    },
  },
  {
    template: "award",
    props: {
      ...rfq,
      buyerName,
      version: 2,
      amount: "48,200.00 EUR for 500 pieces",
      results,
      link: `${origin}/quotes/b7Qm2xV9kLp4Zt6c`,
    },
  },
  {
    template: "regret",
    props: { ...rfq, buyerName, version: 1, results, link: `${origin}/quotes/g5Zs1eW8uNb3Xy9d` },
  },
  {
    template: "password-reset",
    props: {
      requestedAt: "2026-11-26T14:41:00.000Z",
      timeZone: "Europe/Berlin",
      link: `${origin}/password/new?token=Yb6rE1sUo8nKd5wQ`,
    },
  },
  {
    template: "password-changed",
    props: { changedAt: "2026-11-26T14:45:00.000Z", timeZone: "Europe/Berlin", link: `${origin}/password/forgotten` },
  },
];
