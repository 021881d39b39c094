// Stub.
export default function QuoteFiles() {
  return <p>stub</p>;
}
