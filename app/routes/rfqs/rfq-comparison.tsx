// Stub.
export default function RfqComparison() {
  return <p>stub</p>;
}
