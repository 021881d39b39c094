// The small forms around an RFQ: rows of invitations, cancelling, declining, the status of a supplier.
import { z } from "zod";
import {
  addError,
  choiceField,
  collect,
  formValues,
  groupRows,
  hasErrors,
  longTextField,
  parseFields,
  publicIdField,
  type FormResult,
  type FormValues,
} from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { MOST_INVITATIONS, parseInvitationForm, type InvitationInput } from "~/forms/rfq";
import { SUPPLIER_STATUSES, type SupplierStatus } from "~/forms/supplier-status";

/**
 * Reads rows `invitations.0.company`, `invitations.0.email` …; blank rows are none, at least one is wanted.
 * Each row keeps its posted index, under which a service reports what is wrong with it.
 */
export function parseInvitationRows(
  source: FormData | FormValues,
): FormResult<readonly (InvitationInput & { readonly index: number })[]> {
  const values = formValues(source);
  const errors: FieldErrors = {};
  const rows = groupRows(values, "invitations").filter(({ fields }) =>
    [fields.company, fields.email].some((text) => (text ?? "").trim() !== ""),
  );
  if (rows.length === 0) addError(errors, "invitations.0.company", "Enter a company and an address.");
  if (rows.length > MOST_INVITATIONS) addError(errors, "form", `At most ${MOST_INVITATIONS} invitations.`);
  const companies = new Set<string>();
  const addresses = new Set<string>();
  const read = rows.flatMap(({ index, fields }) => {
    const row = parseInvitationForm(fields);
    const prefix = `invitations.${index}.`;
    if (!row.ok) {
      for (const [field, sentences = []] of Object.entries(row.errors))
        for (const sentence of sentences) addError(errors, prefix + field, sentence);
      return [];
    }
    const company = row.value.company.toLocaleLowerCase("en");
    if (companies.has(company)) addError(errors, `${prefix}company`, "This company is listed twice.");
    if (addresses.has(row.value.email)) addError(errors, `${prefix}email`, "This address is listed twice.");
    companies.add(company);
    addresses.add(row.value.email);
    return [{ ...row.value, index }];
  });
  return hasErrors(errors) ? { ok: false, errors, values } : { ok: true, value: read };
}

const reason = longTextField(2_000, 3, "Give the reason in a few words.");
const Reason = z.object({ reason });

/** Field `reason`: why an RFQ is cancelled, or an invitation declined. */
export const parseReasonForm = (source: FormData | FormValues): FormResult<{ reason: string }> =>
  parseFields(Reason, source);

const chosenSupplier = publicIdField("Choose a supplier.");
const Status = z.object({
  supplier: chosenSupplier,
  status: choiceField(SUPPLIER_STATUSES, "Choose candidate, approved or blocked."),
});

/** Fields `supplier`, `status`. */
export const parseSupplierStatusForm = (
  source: FormData | FormValues,
): FormResult<{ supplier: string; status: SupplierStatus }> => parseFields(Status, source);

const Chosen = z.object({ invitation: publicIdField("Choose an invitation.") });

/** Field `invitation`: which one a button of a row stands for. */
export function readInvitationId(source: FormData): string | null {
  return collect(Chosen, formValues(source), {})?.invitation ?? null;
}
