// The measured files as the server sends them: in their places, and usable without script.
import { renderToStaticMarkup } from "react-dom/server";
import { createRoutesStub } from "react-router";
import { expect, test } from "vitest";
import { groupMeasurements, type MeasuredFile } from "~/components/measurement-groups";
import { MeasurementList } from "~/components/measurement-list";
import { PROPOSED_SETUP } from "~/forms/setup";

const file = (k: number, serial: string | null, temperature: string | null, rest: Partial<MeasuredFile> = {}) => ({
  publicId: `file${k}`.padEnd(16, "0"),
  fileId: `bytes${k}`.padEnd(16, "0"),
  fileName: `sweep ${k}.s2p`,
  size: 1000,
  serial,
  temperature,
  points: 2001,
  sweep: [1.7e9, 2.2e9] as const,
  step: [250_000, 250_000] as const,
  setup: null,
  notes: [],
  verdict: null,
  coverage: null,
  worst: null,
  ...rest,
});

const files: MeasuredFile[] = [
  file(1, "U-10", "25.0"),
  file(2, "U-2", "70.0"),
  file(3, null, "25.0"),
  file(4, "U-2", "-30.0", { setup: { noiseFloor: 112, noiseFloorKind: "rms" } }),
  file(5, "U-2", "70.0", { step: [100_000, 1_000_000] }),
  file(6, "U-10", null),
];

function render(props: Partial<Parameters<typeof MeasurementList>[0]> = {}): string {
  const Page = () => (
    <MeasurementList
      entries={files}
      scoring="pending"
      canEdit
      setups={{ assumed: PROPOSED_SETUP, quote: { transmission: 0.05 } }}
      {...props}
    />
  );
  const Stub = createRoutesStub([{ path: "/", Component: Page }]);
  return renderToStaticMarkup(<Stub />);
}

const withoutNoscript = (html: string) => html.replace(/<noscript>.*?<\/noscript>/gs, "");
const placesOf = (html: string, words: readonly string[]) => words.map((word) => html.indexOf(word));
const ascending = (places: readonly number[]) => places.every((place, k) => place > (places[k - 1] ?? -1));

test("files are grouped by unit in the order of their numbers and by temperature from the coldest; what lacks one comes first", () => {
  const { unplaced, units } = groupMeasurements(files);
  expect(unplaced.map(({ fileName }) => fileName)).toEqual(["sweep 3.s2p", "sweep 6.s2p"]);
  expect(
    units.map(({ serial, measurements }) => [
      serial,
      measurements.map(({ temperature, files: of }) => [temperature, of.length]),
    ]),
  ).toEqual([
    [
      "U-2",
      [
        ["-30.0", 1],
        ["70.0", 2],
      ],
    ],
    ["U-10", [["25.0", 1]]],
  ]);
});

test("the groups stand under their headings, with points, steps and what is stated of a sweep alone", () => {
  const html = render();
  const headings = ["Not placed yet", "sweep 3.s2p", "Unit U-2", "−30 °C", "sweep 4.s2p", "sweep 2.s2p", "Unit U-10"];
  expect(ascending(placesOf(withoutNoscript(html), headings))).toBe(true);
  expect(html).toContain("2,001 points, step 250 kHz");
  expect(html).toContain("steps 100 kHz to 1 MHz");
  expect(html).toContain("Own setup: noise floor below a through 112 dB, rms");
  expect(html).toContain("being scored");
  expect(render({ scoring: "failed" })).toContain("not scored");
});

test("without script every file can be ticked and placed, and one without a place is named in its row", () => {
  const html = render();
  const form = /<form[^>]*id="([^"]*)"/.exec(html)?.[1] ?? "none";
  const noscript = [...html.matchAll(/<noscript>(.*?)<\/noscript>/gs)].map(([, inner]) => inner).join("");
  for (const { publicId } of files) expect(html).toMatch(new RegExp(`<input[^>]*name="select\\.${publicId}"`));
  for (const name of ["place", "placeSerial", "placeTemperature"])
    expect(noscript).toMatch(new RegExp(`<(?:select|input)[^>]*form="${form}"[^>]*name="${name}"`));
  expect(noscript).toContain('value="-30.0 U-2"');
  expect(noscript).toMatch(/<button[^>]*value="place"/);
  const [unplaced] = groupMeasurements(files).unplaced;
  expect(html).toMatch(new RegExp(`<input[^>]*form="${form}"[^>]*name="serial\\.${unplaced?.publicId ?? ""}"`));
  expect(html.match(/name="serial\./g)).toHaveLength(2);
});

test("the setup of a sweep opens under its row, with what the quote states and the RFQ assumes in blank fields", () => {
  const own = files[3] as MeasuredFile;
  const html = render({ setupOf: own.publicId });
  expect(html).toContain(`Setup of ${own.fileName}`);
  expect(html).toContain('placeholder="0.05 dB of the quote"');
  expect(html).toContain('placeholder="assumed 36 dB"');
  expect(html).toContain('placeholder="nothing assumed"');
  expect(/<input[^>]*name="setup\.noiseFloor"[^>]*>/.exec(html)?.[0]).toContain('value="112 dB"');
  expect(html).toContain(`value="setup:${own.publicId}"`);
  expect(html).toContain("all 3 sweeps of unit U-2");
  expect(html).not.toMatch(/<form[^>]*>(?:(?!<\/form>).)*<form/s); // no form within a form
});

test("where nothing can be changed there is nothing to tick, place, set or remove", () => {
  const html = render({ canEdit: false });
  expect(html).not.toMatch(/<(?:form|input|button|select)/);
  expect(html).toContain("Unit U-2");
});
