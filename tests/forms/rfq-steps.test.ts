// Rows of invitations, reasons and statuses as they are posted.
import { expect, test } from "vitest";
import { parseInvitationRows, parseReasonForm, parseSupplierStatusForm, readInvitationId } from "~/forms/rfq-steps";

const form = (fields: Record<string, string>) => {
  const data = new FormData();
  for (const [name, value] of Object.entries(fields)) data.set(name, value);
  return data;
};

test("blank rows are none, filled ones keep their posted index", () => {
  const read = parseInvitationRows(
    form({
      "invitations.0.company": " ",
      "invitations.0.email": "",
      "invitations.2.company": "Orme Microwave ",
      "invitations.2.email": "Sales@Orme.example",
    }),
  );
  expect(read).toEqual({ ok: true, value: [{ company: "Orme Microwave", email: "sales@orme.example", index: 2 }] });
});

test("faults stand at their field: half a row, a list of addresses, a company or address twice, nothing at all", () => {
  const read = parseInvitationRows(
    form({
      "invitations.0.company": "Orme Microwave",
      "invitations.0.email": "a@orme.example, b@orme.example",
      "invitations.1.company": "",
      "invitations.1.email": "c@orme.example",
      "invitations.2.company": "Pellmark",
      "invitations.2.email": "d@orme.example",
      "invitations.3.company": "PELLMARK",
      "invitations.3.email": "d@orme.example",
    }),
  );
  expect(read.ok).toBe(false);
  if (read.ok) return;
  expect(Object.keys(read.errors).sort()).toEqual([
    "invitations.0.email",
    "invitations.1.company",
    "invitations.3.company",
    "invitations.3.email",
  ]);
  expect(parseInvitationRows(form({}))).toMatchObject({
    ok: false,
    errors: { "invitations.0.company": [expect.any(String)] },
  });
});

test("a reason is trimmed, has at least three characters and at most two thousand", () => {
  expect(parseReasonForm(form({ reason: "  No capacity.\r\nSorry. " }))).toEqual({
    ok: true,
    value: { reason: "No capacity.\nSorry." },
  });
  for (const reason of ["", "  no  ", "x".repeat(2_001)])
    expect(parseReasonForm(form({ reason }))).toMatchObject({ ok: false, errors: { reason: [expect.any(String)] } });
});

test("a status is one of three, and names a supplier by its random id", () => {
  const supplier = "0123456789abcdef";
  expect(parseSupplierStatusForm(form({ supplier, status: "approved" }))).toEqual({
    ok: true,
    value: { supplier, status: "approved" },
  });
  expect(parseSupplierStatusForm(form({ supplier, status: "best" })).ok).toBe(false);
  expect(parseSupplierStatusForm(form({ supplier: "7", status: "approved" })).ok).toBe(false);
  expect(readInvitationId(form({ invitation: supplier }))).toBe(supplier);
  expect(readInvitationId(form({ invitation: "1 OR 1=1" }))).toBeNull();
});
