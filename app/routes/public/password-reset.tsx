// Stub.
export default function PasswordReset() {
  return <p>stub</p>;
}
