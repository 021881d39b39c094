// Stub.
export default function Home() {
  return <p>stub</p>;
}
