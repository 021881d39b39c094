// The version of the core, stored with every figure it computes.

/** Raised whenever a figure may change. */
export const CORE_VERSION = "0.2.0";
