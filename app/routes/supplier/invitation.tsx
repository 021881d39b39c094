// Stub.
export default function Invitation() {
  return <p>stub</p>;
}
