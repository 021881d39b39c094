// Stub.
export default function SpecificationList() {
  return <p>stub</p>;
}
