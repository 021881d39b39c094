// The forms of an organisation: its own settings, and a colleague invited to it.
import { z } from "zod";
import { isCurrency } from "~/commerce/currencies";
import { choiceField, emailField, parseFields, textField, type FormResult, type FormValues } from "~/forms/fields";
import { isTimeZone } from "~/forms/zoned-time";

const Organisation = z.object({
  name: textField("Enter the organisation's name.", 120),
  timeZone: z
    .string()
    .default("")
    .transform((text) => text.trim())
    .refine(isTimeZone, "Choose a time zone by name, as Europe/Berlin."),
  currency: z
    .string()
    .default("")
    .transform((text) => text.trim().toUpperCase())
    .refine(isCurrency, "Choose a currency by its ISO 4217 code, as EUR."),
  decisionRule: choiceField(["simple", "guarded"], "Choose the decision rule."),
  /** A box: absent when it is not ticked. */
  secondPerson: z
    .enum(["on", "off"], { error: "Tick or untick the box." })
    .default("off")
    .transform((box) => box === "on"),
});

const Colleague = z.object({
  email: emailField,
  name: textField("Enter the person's name.", 120),
  role: choiceField(["engineer", "purchasing", "admin"], "Choose a role."),
});

export type OrganisationInput = z.output<typeof Organisation>;
export type ColleagueInput = z.output<typeof Colleague>;

/** Fields `name`, `timeZone`, `currency`, `decisionRule`, `secondPerson` ("on" or absent). */
export const parseOrganisationForm = (source: FormData | FormValues): FormResult<OrganisationInput> =>
  parseFields(Organisation, source);

/** Fields `email`, `name`, `role` of a buyer's colleague. */
export const parseColleagueForm = (source: FormData | FormValues): FormResult<ColleagueInput> =>
  parseFields(Colleague, source);
