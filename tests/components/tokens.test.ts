// The colour tokens as written in app.css: contrast, and distance under colour-vision deficiency, light and dark.
import { readFileSync } from "node:fs";
import { expect, test } from "vitest";

type Rgb = readonly [red: number, green: number, blue: number];
type Matrix = readonly [Rgb, Rgb, Rgb];
type Theme = "light" | "dark";

const themes = ["light", "dark"] as const;
const styles = readFileSync("app/app.css", "utf8");

const tokens = new Map(
  [...styles.matchAll(/--color-([a-z-]+):\s*light-dark\((#[0-9a-f]{6}),\s*(#[0-9a-f]{6})\);/gi)].map(
    ([, name = "", light = "", dark = ""]) => [name, { light: rgb(light), dark: rgb(dark) }],
  ),
);

function rgb(hex: string): Rgb {
  const channel = (from: number) => parseInt(hex.slice(from, from + 2), 16) / 255;
  return [channel(1), channel(3), channel(5)];
}

function token(name: string, theme: Theme): Rgb {
  const found = tokens.get(name);
  if (found === undefined) throw new Error(`app.css has no colour ${name}`);
  return found[theme];
}

// IEC 61966-2-1, the sRGB transfer function.
const linear = (c: number): number => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4);
const linearRgb = ([red, green, blue]: Rgb): Rgb => [linear(red), linear(green), linear(blue)];
const dot = (a: Rgb, b: Rgb): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const times = (matrix: Matrix, v: Rgb): Rgb => [dot(matrix[0], v), dot(matrix[1], v), dot(matrix[2], v)];

// WCAG 2.2, "relative luminance" and "contrast ratio".
const luminance = (colour: Rgb): number => dot([0.2126, 0.7152, 0.0722], linearRgb(colour));
function contrast(a: Rgb, b: Rgb): number {
  const [dark = 0, light = 0] = [luminance(a), luminance(b)].sort((x, y) => x - y);
  return (light + 0.05) / (dark + 0.05);
}

/** `colour` at 16 % over `ground`, as the browser blends it. */
const tint = (colour: Rgb, ground: Rgb): Rgb => [
  0.16 * colour[0] + 0.84 * ground[0],
  0.16 * colour[1] + 0.84 * ground[1],
  0.16 * colour[2] + 0.84 * ground[2],
];

// Machado, Oliveira, Fernandes, "A Physiologically-based Model for Simulation of Color Vision Deficiency",
// IEEE Trans. Visualization and Computer Graphics 15(6), 2009: matrices of severity 1.0, on linear RGB.
const deficiencies: Record<string, Matrix> = {
  protanopia: [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  deuteranopia: [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
  tritanopia: [
    [1.255528, -0.076749, -0.178779],
    [-0.078411, 0.930809, 0.147602],
    [0.004733, 0.691367, 0.3039],
  ],
};

// sRGB to XYZ of IEC 61966-2-1; CIE 15: L*a*b* for D65 and the CIE76 difference.
const toXyz: Matrix = [
  [0.4124, 0.3576, 0.1805],
  [0.2126, 0.7152, 0.0722],
  [0.0193, 0.1192, 0.9505],
];
function lab(linearColour: Rgb): Rgb {
  const clipped = linearColour.map((c) => Math.min(1, Math.max(0, c))) as [number, number, number];
  const [x, y, z] = times(toXyz, clipped);
  const f = (t: number) => (t > (6 / 29) ** 3 ? Math.cbrt(t) : t / (3 * (6 / 29) ** 2) + 4 / 29);
  const [fx, fy, fz] = [f(x / 0.9505), f(y), f(z / 1.089)];
  return [116 * fy - 16, 500 * (fx - fy), 200 * (fy - fz)];
}
const difference = (a: Rgb, b: Rgb): number => Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);

const pairs = <T>(items: readonly T[]): [T, T][] =>
  items.flatMap((a, k) => items.slice(k + 1).map((b): [T, T] => [a, b]));

test("the tokens are the twelve colours of the design, each with a value for day and night", () => {
  const names = "sheet leaf ink quiet edge rule signal on-signal pass near fail bare".split(" ");
  expect([...tokens.keys()].sort()).toEqual(names.sort());
});

test("nothing but the tokens exists: every default of the framework's theme is off", () => {
  expect(styles).toMatch(/@theme[^{]*\{\s*--\*: initial;/);
});

test("the contrast of black on white is 21, and of the published example #777777 on white 4.48", () => {
  expect(contrast([0, 0, 0], [1, 1, 1])).toBeCloseTo(21, 10);
  // WebAIM's well-known near miss of 4.5:1, from memory.
  expect(contrast(rgb("#777777"), [1, 1, 1])).toBeCloseTo(4.48, 2);
});

test("text colours have 4.5:1 on sheet and leaf", () => {
  for (const theme of themes)
    for (const ground of ["sheet", "leaf"])
      for (const name of ["ink", "quiet", "signal", "pass", "near", "fail", "bare"]) {
        const ratio = contrast(token(name, theme), token(ground, theme));
        expect(ratio, `${name} on ${ground}, ${theme}`).toBeGreaterThanOrEqual(4.5);
      }
});

test("the label of a filled button has 4.5:1 on it, and the edge of a field 3:1 on sheet and leaf", () => {
  for (const theme of themes) {
    expect(contrast(token("on-signal", theme), token("signal", theme))).toBeGreaterThanOrEqual(4.5);
    for (const ground of ["sheet", "leaf"])
      expect(contrast(token("edge", theme), token(ground, theme)), `${ground}, ${theme}`).toBeGreaterThanOrEqual(3);
  }
});

test("near, fail and bare have 4.5:1 on their own 16 % tint of sheet and leaf", () => {
  for (const theme of themes)
    for (const ground of ["sheet", "leaf"])
      for (const name of ["near", "fail", "bare"]) {
        const colour = token(name, theme);
        const ratio = contrast(colour, tint(colour, token(ground, theme)));
        expect(ratio, `${name} on its tint of ${ground}, ${theme}`).toBeGreaterThanOrEqual(4.5);
      }
});

test("signal and the verdicts stay 15 apart in CIE76, seen fully and with each dichromacy", () => {
  const eyes: [string, Matrix][] = [
    [
      "full colour vision",
      [
        [1, 0, 0],
        [0, 1, 0],
        [0, 0, 1],
      ],
    ],
    ...Object.entries(deficiencies),
  ];
  for (const theme of themes)
    for (const [eye, matrix] of eyes)
      for (const [a, b] of pairs(["signal", "pass", "near", "fail", "bare"])) {
        const seen = (name: string) => lab(times(matrix, linearRgb(token(name, theme))));
        expect(difference(seen(a), seen(b)), `${a} and ${b}, ${eye}, ${theme}`).toBeGreaterThanOrEqual(15);
      }
});
