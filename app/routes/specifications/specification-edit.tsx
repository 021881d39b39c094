// Stub.
export default function SpecificationEdit() {
  return <p>stub</p>;
}
