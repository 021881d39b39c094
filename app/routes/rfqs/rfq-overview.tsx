// Stub.
export default function RfqOverview() {
  return <p>stub</p>;
}
