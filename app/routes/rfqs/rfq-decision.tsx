// Stub.
export default function RfqDecision() {
  return <p>stub</p>;
}
