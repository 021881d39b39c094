// Stub.
export default function QuoteTerms() {
  return <p>stub</p>;
}
