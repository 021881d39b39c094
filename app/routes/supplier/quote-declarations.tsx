// Stub.
export default function QuoteDeclarations() {
  return <p>stub</p>;
}
