// Stub.
export default function QuoteResults() {
  return <p>stub</p>;
}
