// Stub.
export default function Mail() {
  return <p>stub</p>;
}
