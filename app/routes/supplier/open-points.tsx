// Stub.
export default function OpenPoints() {
  return <p>stub</p>;
}
