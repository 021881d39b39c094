// Stub.
export default function SupplierList() {
  return <p>stub</p>;
}
