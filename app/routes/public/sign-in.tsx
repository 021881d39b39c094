// Stub.
export default function SignIn() {
  return <p>stub</p>;
}
