// One measured file of a supplier's quote: its unit and temperature named, or the file taken out.
import { data } from "react-router";
import { parseSweepLabels } from "~/forms/measurement";
import { labelMeasurement, removeMeasurement } from "~/services/measurement-changes.server";
import { orNotFound, requirePerson } from "~/services/request.server";
import type { Route } from "./+types/measurement";

export async function action({ context, request, params }: Route.ActionArgs) {
  const person = requirePerson(context, request, "supplier");
  const form = await request.formData();
  if (form.get("intent") === "remove") {
    const removed = orNotFound(await removeMeasurement(person, params.measurementId));
    return removed.ok ? data({ ok: true, errors: {} }) : data({ ok: false, errors: removed.errors }, { status: 400 });
  }
  const labels = parseSweepLabels(form);
  if (!labels.ok) return data({ ok: false, errors: labels.errors }, { status: 400 });
  const named = orNotFound(await labelMeasurement(person, params.measurementId, labels.value));
  if (!named.ok) return data({ ok: false, errors: named.errors }, { status: 400 });
  return data({ ok: true, errors: {}, measurement: named.value.publicId });
}
