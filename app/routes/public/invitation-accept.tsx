// Stub.
export default function InvitationAccept() {
  return <p>stub</p>;
}
