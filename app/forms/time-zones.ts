// The time zones a form offers.

/** IANA names, UTC first, with the one in use among them. */
export function timeZones(inUse?: string): string[] {
  const names = new Set(["UTC", ...Intl.supportedValuesOf("timeZone"), ...(inUse ? [inUse] : [])]);
  names.delete("UTC");
  return ["UTC", ...[...names].sort()];
}
