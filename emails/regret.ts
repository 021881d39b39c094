// Regret, to a supplier not awarded: its own results and nothing of others.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { Link, rfqBlock, rfqFields } from "./props";
import { ResultLine } from "./results";

export const RegretProps = z.strictObject({
  ...rfqFields,
  buyerName: z.string(),
  version: z.int().positive(),
  results: z.array(ResultLine),
  link: Link,
});
export type RegretProps = z.infer<typeof RegretProps>;

export function regret(props: RegretProps): Promise<RenderedMail> {
  return renderContent("regret", {
    ...rfqBlock(props),
    subject: `${props.rfqNumber}: decision on your quote`,
    lead: `${props.buyerName} has decided this RFQ. Your quote was not selected. Thank you for quoting.`,
    facts: [
      { label: "Buyer", value: props.buyerName },
      { label: "Your quote", value: `version ${props.version}` },
    ],
    results: props.results,
    action: { label: "Open the quote", link: props.link },
    notes: ["Results speak of the submitted data only."],
  });
}
