// Stub.
export default function ForgottenPassword() {
  return <p>stub</p>;
}
