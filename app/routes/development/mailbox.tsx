// Stub.
export default function Mailbox() {
  return <p>stub</p>;
}
