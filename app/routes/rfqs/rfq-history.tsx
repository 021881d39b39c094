// Stub.
export default function RfqHistory() {
  return <p>stub</p>;
}
