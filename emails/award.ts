// Notice of intent, to the awarded supplier, with its own results.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { Link, rfqBlock, rfqFields } from "./props";
import { ResultLine } from "./results";

export const AwardProps = z.strictObject({
  ...rfqFields,
  buyerName: z.string(),
  version: z.int().positive(),
  /** "48,200.00 EUR for 500 pieces" */
  amount: z.string().optional(),
  results: z.array(ResultLine),
  link: Link,
});
export type AwardProps = z.infer<typeof AwardProps>;

export function award(props: AwardProps): Promise<RenderedMail> {
  return renderContent("award", {
    ...rfqBlock(props),
    subject: `${props.rfqNumber}: award, notice of intent`,
    lead: `${props.buyerName} intends to award this RFQ to you.`,
    facts: [
      { label: "Buyer", value: props.buyerName },
      { label: "Your quote", value: `version ${props.version}` },
      ...(props.amount === undefined ? [] : [{ label: "Amount", value: props.amount }]),
    ],
    results: props.results,
    action: { label: "Open the quote", link: props.link },
    notes: [
      "This is a notice of intent; the purchase order governs.",
      "Results speak of the submitted data only: they are no qualification and no first-article approval.",
    ],
  });
}
