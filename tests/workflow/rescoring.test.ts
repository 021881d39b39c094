// Whose figures follow the core and the revision, over every state of RFQ and quote.
import { expect, test } from "vitest";
import { QUOTE_STATES } from "~/workflow/quote";
import { isRescored } from "~/workflow/rescoring";
import { RFQ_STATES } from "~/workflow/rfq";

test("only the current version of a submitted quote is scored again, and only until its RFQ is decided or cancelled", () => {
  const followed = RFQ_STATES.flatMap((status) =>
    QUOTE_STATES.flatMap((state) =>
      [7, 8, null].flatMap((currentVersionId) =>
        isRescored(7, { state, currentVersionId }, { status }) ? [[status, state, currentVersionId]] : [],
      ),
    ),
  );
  expect(followed).toEqual([
    ["open", "submitted", 7],
    ["closed", "submitted", 7],
  ]);
});
