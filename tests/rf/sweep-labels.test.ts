// Unit and temperature read from names and comments, and left open where they can be read two ways.
import { expect, test } from "vitest";
import { readSweepLabels } from "~/rf/sweep-labels";

const read = (name: string, ...comments: string[]) => {
  const { serial, temperature } = readSweepLabels(name, comments);
  return [serial, temperature];
};

test("names of serial and temperature are read with their signs", () => {
  expect(read("HR2-0411_-30C.s2p")).toEqual(["HR2-0411", -30]);
  expect(read("KCF-0205_+25C.s2p")).toEqual(["KCF-0205", 25]);
  expect(read("OM-0031_25C.s2p")).toEqual(["OM-0031", 25]);
  expect(read("SN7 70.5 degC.S2P")).toEqual(["SN7", 70.5]);
  expect(read("unit12_25°C_final.s2p")).toEqual(["unit12", 25]);
});

test("comments name what the file's name does not", () => {
  expect(read("wide.s2p", " Serial No.: A-17", " Temperature: -40 degC")).toEqual(["A-17", -40]);
  expect(read("sweep.s2p", "S/N 0042", "temp = +70.0 C")).toEqual(["0042", 70]);
});

test("a comment's serial counts before the name", () => {
  expect(read("measurement-3_25C.s2p", "Serial KCF-0205")).toEqual(["KCF-0205", 25]);
});

test("what can be read two ways is left open", () => {
  // The hyphen may part serial and temperature, or be the sign.
  expect(read("0411-30C.s2p")[1]).toBeNull();
  expect(read("A1_25C.s2p", "Temperature 70 degC")[1]).toBeNull();
});

test("words without a digit are no serial, and other figures no temperature", () => {
  expect(read("wide sweep.s2p")).toEqual([null, null]);
  expect(read("filter_2GHz.s2p", "calibrated 2026-11-17, 100 Hz IF bandwidth, 0 dBm")).toEqual(["filter_2GHz", null]);
  expect(read(`${"9".repeat(61)}.s2p`)[0]).toBeNull();
});

test("a file's thousand comments of blanks are read in no time", () => {
  const comments = Array.from({ length: 500 }, () => [`temp${" ".repeat(990)}x`, `serial${" ".repeat(990)}!`]).flat();
  const started = performance.now();
  expect(read("wide.s2p", ...comments)).toEqual([null, null]);
  expect(performance.now() - started).toBeLessThan(1_000); // tried run by run, one such comment takes longer
});

test("a temperature nothing is measured at is left open, and a serial has no characters that are not shown", () => {
  expect(read("A1_+999C.s2p")).toEqual(["A1", null]);
  expect(read("A1.s2p", "temperature -300 degC")).toEqual(["A1", null]);
  expect(read("wide.s2p", "Serial:\tA\u200b1\u202e7")).toEqual(["A17", null]);
  expect(read("A\u200b1_\u202e25C.s2p")).toEqual(["A1", 25]); // a file's name before the server takes them out
});

test("a minus that is written as a letter, a word or a dash apart is never read as plus", () => {
  for (const name of [
    "SN12_m40C",
    "SN12_M40C",
    "SN12_n40C",
    "SN12_neg40C",
    "SN12_minus40C",
    "SN12_minus_40C",
    "SN12 - 40C",
  ])
    expect(read(`${name}.s2p`), name).toEqual(["SN12", null]);
  expect(read("SN12_–40C.s2p")).toEqual(["SN12", -40]); // an en dash, as word processors put it
  expect(read("wide.s2p", "temp - 25 C")[1]).toBeNull();
  expect(read("wide.s2p", "temperature: - 25 C")[1]).toBe(-25);
});

test("a letter before a figure makes it part of a name: the temperature is the one that stands by itself, if one does", () => {
  expect(read("S21_C.s2p")).toEqual([null, null]);
  expect(read("AB40C_unit7.s2p")[1]).toBeNull();
  expect(read("X20C-001_70C.s2p")).toEqual(["X20C-001", 70]);
});

test("of two temperatures in a name or in comments none is taken", () => {
  expect(read("SN12_25C_70C.s2p")).toEqual(["SN12", null]);
  expect(read("SN12.s2p", "calibration temp 23.0 C", "DUT temperature -30 C")).toEqual(["SN12", null]);
});

test("comments about units of measure and ports are no serials", () => {
  for (const comment of [
    "Units: MHz",
    "Units in Hz",
    "unit under test: filter",
    "Unit: dB",
    "Serial port COM3",
    "Serialized",
  ])
    expect(read("wide.s2p", comment), comment).toEqual([null, null]);
  expect(read("wide.s2p", "Units: MHz", "Unit serial no. 17")[0]).toBe("17");
});
