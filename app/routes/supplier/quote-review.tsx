// Stub.
export default function QuoteReview() {
  return <p>stub</p>;
}
