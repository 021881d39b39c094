// Running numbers as people read them, per buyer.

/** "SPEC-0007" */
export const specificationNumber = (number: number): string => `SPEC-${String(number).padStart(4, "0")}`;

/** "RFQ-2027-0012" */
export const rfqNumber = (year: number, number: number): string => `RFQ-${year}-${String(number).padStart(4, "0")}`;
