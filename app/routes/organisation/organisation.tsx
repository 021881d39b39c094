// Stub.
export default function Organisation() {
  return <p>stub</p>;
}
