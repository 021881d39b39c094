// The forms of a decision: recommend an award with a reason, approve it, return it with a remark.
import { z } from "zod";
import {
  choiceField,
  countCharacters,
  longTextField,
  parseFields,
  publicIdField,
  type FormResult,
  type FormValues,
} from "~/forms/fields";

export const SHORTEST_REASON = 20;
export const SHORTEST_REMARK = 10;
const LONGEST_TEXT = 4000;

const Recommendation = z.object({
  quoteId: publicIdField("Choose the quote to award."),
  reason: longTextField(
    LONGEST_TEXT,
    SHORTEST_REASON,
    `Give the reason in ${SHORTEST_REASON} characters or more: it is kept with the decision.`,
  ),
});

const Verdict = z.object({
  intent: choiceField(["approve", "return"], "Choose to approve or to return."),
  decisionId: publicIdField("Reload the page: the recommendation is not named."),
  remark: longTextField(LONGEST_TEXT),
});

export type RecommendationInput = z.output<typeof Recommendation>;
/** `remark` may be blank where the award is approved. */
export type DecisionInput = z.output<typeof Verdict>;

/** Fields `quoteId` (public id), `reason`. */
export const parseRecommendationForm = (source: FormData | FormValues): FormResult<RecommendationInput> =>
  parseFields(Recommendation, source);

/** Fields `intent` (approve or return), `decisionId` (public id), `remark`. */
export const parseDecisionForm = (source: FormData | FormValues): FormResult<DecisionInput> =>
  parseFields(
    Verdict.superRefine((input, context) => {
      if (input.intent === "approve" || countCharacters(input.remark) >= SHORTEST_REMARK) return;
      context.addIssue({
        code: "custom",
        path: ["remark"],
        message: `Say what should change, in ${SHORTEST_REMARK} characters or more.`,
      });
    }),
    source,
  );
