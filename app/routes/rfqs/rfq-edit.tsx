// Stub.
export default function RfqEdit() {
  return <p>stub</p>;
}
