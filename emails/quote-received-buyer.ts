// A quote has arrived, to the buyer, with its results.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { formatInstant } from "./format";
import { Instant, Link, rfqBlock, rfqFields, TimeZone } from "./props";
import { ResultLine } from "./results";

export const QuoteReceivedBuyerProps = z.strictObject({
  ...rfqFields,
  supplierName: z.string(),
  version: z.int().positive(),
  submittedAt: Instant,
  dueAt: Instant,
  dueZone: TimeZone,
  /** "fail; does not comply under simple acceptance" */
  outcome: z.string().optional(),
  results: z.array(ResultLine),
  link: Link,
});
export type QuoteReceivedBuyerProps = z.infer<typeof QuoteReceivedBuyerProps>;

export function quoteReceivedBuyer(props: QuoteReceivedBuyerProps): Promise<RenderedMail> {
  return renderContent("quote-received-buyer", {
    ...rfqBlock(props),
    subject: `${props.rfqNumber}: quote from ${props.supplierName}, version ${props.version}`,
    lead: `${props.supplierName} has submitted version ${props.version} of its quote.`,
    facts: [
      { label: "Supplier", value: props.supplierName },
      { label: "Version", value: String(props.version) },
      { label: "Submitted", value: formatInstant(props.submittedAt, props.dueZone) },
      { label: "Quotes due", value: formatInstant(props.dueAt, props.dueZone) },
      ...(props.outcome === undefined ? [] : [{ label: "Verdict", value: props.outcome }]),
    ],
    results: props.results,
    action: { label: "Open the quote", link: props.link },
    notes: ["Results speak of the submitted data only."],
  });
}
