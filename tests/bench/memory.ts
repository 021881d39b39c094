// Reads a file in a process of its own and prints, as JSON, how much memory that took: what its resident set rose to.
import { readFileSync, writeFileSync } from "node:fs";
import { parseTouchstone } from "../../app/rf/index";

const KIBIBYTE = 1024;

/** Linux: writing 5 sets the peak of the resident set back to what it is now (proc(5), clear_refs). */
const forgetPeak = () => writeFileSync("/proc/self/clear_refs", "5");

function residentBytes(field: "VmRSS" | "VmHWM"): number {
  const match = new RegExp(`^${field}:\\s+(\\d+) kB$`, "m").exec(readFileSync("/proc/self/status", "utf8"));
  if (match === null) throw new Error(`/proc/self/status has no ${field}`);
  return Number(match[1]) * KIBIBYTE;
}

const collect = globalThis.gc;
if (collect === undefined) throw new Error("run with --expose-gc");
const bytes = readFileSync(process.argv[2] ?? "");
collect();
forgetPeak();
const before = residentBytes("VmRSS");
// Nothing was read before, so that no memory of an earlier reading is used again: what is compiled counts too.
const { frequency } = parseTouchstone(bytes);
const extraBytes = residentBytes("VmHWM") - before;
console.log(JSON.stringify({ points: frequency.length, fileBytes: bytes.length, extraBytes }));
