// Stub.
export default function RfqList() {
  return <p>stub</p>;
}
