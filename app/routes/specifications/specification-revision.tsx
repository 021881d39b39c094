// Stub.
export default function SpecificationRevision() {
  return <p>stub</p>;
}
