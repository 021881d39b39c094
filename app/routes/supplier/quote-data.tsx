// Stub.
export default function QuoteData() {
  return <p>stub</p>;
}
