// Stub.
export default function Specification() {
  return <p>stub</p>;
}
