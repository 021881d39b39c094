// An award is recommended, to those who may approve it.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { Link, rfqBlock, rfqFields } from "./props";

export const AwardRecommendedProps = z.strictObject({
  ...rfqFields,
  supplierName: z.string(),
  version: z.int().positive(),
  /** "48,200.00 EUR for 500 pieces" */
  amount: z.string(),
  recommendedBy: z.string(),
  reason: z.string(),
  link: Link,
});
export type AwardRecommendedProps = z.infer<typeof AwardRecommendedProps>;

export function awardRecommended(props: AwardRecommendedProps): Promise<RenderedMail> {
  return renderContent("award-recommended", {
    ...rfqBlock(props),
    subject: `${props.rfqNumber}: award to ${props.supplierName} recommended`,
    lead: `${props.recommendedBy} recommends an award to ${props.supplierName}. It needs your approval.`,
    facts: [
      { label: "Supplier", value: props.supplierName },
      { label: "Quote", value: `version ${props.version}` },
      { label: "Amount", value: props.amount },
      { label: "Recommended by", value: props.recommendedBy },
    ],
    quotation: { caption: "Reason", text: props.reason },
    action: { label: "Open the decision", link: props.link },
    notes: ["Approve the recommendation, or return it with a remark."],
  });
}
