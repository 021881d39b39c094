// Stub.
export default function NotFound() {
  return <p>stub</p>;
}
