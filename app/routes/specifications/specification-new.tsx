// Stub.
export default function SpecificationNew() {
  return <p>stub</p>;
}
