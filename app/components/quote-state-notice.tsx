// What the state of a quote means for its sheets: closed to changes, or changed since it was submitted.
import { Link } from "react-router";
import { Notice } from "./notice";
import { quoteSheetAddress, type SupplierQuoteBlockHead } from "./supplier-quote-block";

export function QuoteStateNotice({ head }: { head: SupplierQuoteBlockHead }) {
  if (head.refusal !== null) return <Notice className="mt-6">{head.refusal} Nothing can be changed any more.</Notice>;
  if (head.version === 0) return null;
  if (!head.changedSince)
    return (
      <Notice className="mt-6">
        Version {head.version} is with the buyer. What you change here counts once it is submitted again, before the due
        date.
      </Notice>
    );
  return (
    <Notice tone="near" className="mt-6">
      Changed since version {head.version}: the buyer has not got these changes.{" "}
      <Link to={quoteSheetAddress("Review", head.publicId)}>Review and submit again</Link>
    </Notice>
  );
}
