// Stub.
export default function Buyer() {
  return <p>stub</p>;
}
