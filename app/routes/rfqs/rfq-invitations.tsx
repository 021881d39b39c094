// Stub.
export default function RfqInvitations() {
  return <p>stub</p>;
}
