// The recommendation came back, to its recommender.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { Link, rfqBlock, rfqFields } from "./props";

export const AwardReturnedProps = z.strictObject({
  ...rfqFields,
  supplierName: z.string(),
  returnedBy: z.string(),
  remark: z.string(),
  link: Link,
});
export type AwardReturnedProps = z.infer<typeof AwardReturnedProps>;

export function awardReturned(props: AwardReturnedProps): Promise<RenderedMail> {
  return renderContent("award-returned", {
    ...rfqBlock(props),
    subject: `${props.rfqNumber}: recommendation returned`,
    lead: `${props.returnedBy} has returned your recommendation of ${props.supplierName}.`,
    facts: [
      { label: "Supplier", value: props.supplierName },
      { label: "Returned by", value: props.returnedBy },
    ],
    quotation: { caption: "Remark", text: props.remark },
    action: { label: "Open the decision", link: props.link },
    notes: ["Nothing has been awarded and no supplier has been told."],
  });
}
