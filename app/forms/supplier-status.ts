// What a buyer's directory says of a supplier.
export const SUPPLIER_STATUSES = ["candidate", "approved", "blocked"] as const;

export type SupplierStatus = (typeof SUPPLIER_STATUSES)[number];
