// Stub.
export default function Account() {
  return <p>stub</p>;
}
