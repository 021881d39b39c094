// What a quote states of its measurement: the setup so far as it is typed, and analyser, calibration method and date in words.
import { z } from "zod";
import { collect, optionalTextField, type FormValues } from "~/forms/fields";
import type { FieldErrors } from "~/forms/form";
import { readSetup } from "~/forms/setup";
import { isDate } from "~/forms/zoned-time";
import type { Setup } from "~/rf/contract";
import type { Instrument } from "~/rf/stated-measurement";

/** The setup a draft states now: figures that cannot be read are left out until they are put right. */
export const statedSetup = (values: FormValues): Setup => readSetup(values, {}, false);

const DAY_MILLISECONDS = 86_400_000;
const LONGEST_WORDS = 200;

/** The day after: where the supplier sits it may be tomorrow already. */
const dayAfter = (day: string): string =>
  new Date(Date.parse(`${day}T00:00:00Z`) + DAY_MILLISECONDS).toISOString().slice(0, 10);

const instrumentSchema = (today: string) =>
  z.object({
    "instrument.analyser": optionalTextField(LONGEST_WORDS),
    "instrument.calibration": optionalTextField(LONGEST_WORDS),
    "instrument.calibratedOn": z
      .string()
      .default("")
      .transform((text, context): string | null => {
        const day = text.trim();
        if (day === "") return null;
        if (!isDate(day)) context.addIssue("Enter the date as year-month-day, 2027-03-31.");
        else if (day > dayAfter(today))
          context.addIssue("The calibration lies in the future. Enter the day it was done.");
        return day;
      }),
  });

/** Reads `instrument.*`; blank fields are left out. @param today "2026-11-27" */
export function readInstrument(values: FormValues, today: string, errors: FieldErrors): Instrument {
  const read = collect(instrumentSchema(today), values, errors);
  const analyser = read?.["instrument.analyser"];
  const calibration = read?.["instrument.calibration"];
  const calibratedOn = read?.["instrument.calibratedOn"];
  return {
    ...(analyser ? { analyser } : {}),
    ...(calibration ? { calibration } : {}),
    ...(calibratedOn ? { calibratedOn } : {}),
  };
}

export const instrumentToValues = ({ analyser, calibration, calibratedOn }: Instrument): FormValues => ({
  "instrument.analyser": analyser ?? "",
  "instrument.calibration": calibration ?? "",
  "instrument.calibratedOn": calibratedOn ?? "",
});
