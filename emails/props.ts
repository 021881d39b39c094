// Schemas shared by the events' props: instants, zones, links, and what names an RFQ.
import { Temporal } from "temporal-polyfill";
import { z } from "zod";

/** ISO 8601 instant with Z or offset. */
export const Instant = z.iso.datetime({ offset: true });

/** IANA zone name this runtime knows. */
export const TimeZone = z.string().refine((zone) => {
  try {
    Temporal.Now.zonedDateTimeISO(zone);
    return true;
  } catch {
    return false;
  }
}, "not an IANA time zone");

/** Absolute http or https address: nothing else may become a mail's link. */
export const Link = z.url({ protocol: /^https?$/ });

/** What names the RFQ in each mail about it. */
export const rfqFields = {
  /** "RFQ-2027-0012" */
  rfqNumber: z.string(),
  rfqTitle: z.string(),
};

/** The title block of a mail about an RFQ. */
export function rfqBlock(props: { rfqNumber: string; rfqTitle: string }) {
  return { number: { label: "RFQ", value: props.rfqNumber }, title: { label: "Filter", value: props.rfqTitle } };
}
