// Stub.
export default function RfqNew() {
  return <p>stub</p>;
}
