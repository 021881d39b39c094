// Receipt of a submitted quote, to the supplier, with its own results.
import { z } from "zod";
import { renderContent, type RenderedMail } from "./content";
import { formatInstant } from "./format";
import { Instant, Link, rfqBlock, rfqFields, TimeZone } from "./props";
import { ResultLine } from "./results";

export const QuoteReceivedSupplierProps = z.strictObject({
  ...rfqFields,
  buyerName: z.string(),
  version: z.int().positive(),
  /** Reference of the receipt as the quote's page shows it, such as the content's hash. */
  receipt: z.string(),
  submittedAt: Instant,
  dueAt: Instant,
  dueZone: TimeZone,
  /** "fail; does not comply under simple acceptance" */
  outcome: z.string().optional(),
  results: z.array(ResultLine),
  link: Link,
});
export type QuoteReceivedSupplierProps = z.infer<typeof QuoteReceivedSupplierProps>;

export function quoteReceivedSupplier(props: QuoteReceivedSupplierProps): Promise<RenderedMail> {
  return renderContent("quote-received-supplier", {
    ...rfqBlock(props),
    subject: `${props.rfqNumber}: quote version ${props.version} received`,
    lead: `${props.buyerName} has received version ${props.version} of your quote.`,
    facts: [
      { label: "Version", value: String(props.version) },
      { label: "Submitted", value: formatInstant(props.submittedAt, props.dueZone) },
      { label: "Receipt", value: props.receipt },
      { label: "Quote due", value: formatInstant(props.dueAt, props.dueZone) },
      ...(props.outcome === undefined ? [] : [{ label: "Verdict", value: props.outcome }]),
    ],
    results: props.results,
    action: { label: "Open the quote", link: props.link },
    notes: [
      "The quote may be submitted again until the due date; the last version counts.",
      "Results speak of the submitted data only.",
    ],
  });
}
