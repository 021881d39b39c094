// The core's public face: everything outside app/rf imports from here.
export * from "./contract.ts";
