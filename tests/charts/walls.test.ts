// Proves which requirements become walls, where they join, and how their sides and numbers are drawn.
import { expect, test } from "vitest";
import { layoutDrawing } from "~/charts/layout";
import type { NumberedRequirement } from "~/charts/types";
import { wallShapes } from "~/charts/wall-shape";
import { passbands, wallsFromRequirements } from "~/charts/walls";

const rejection = (
  id: string,
  lineNumber: string,
  band: readonly [number, number],
  min: number,
): NumberedRequirement => {
  return { id, lineNumber, kind: "rejection", band, min };
};

function shapesOf(requirements: readonly NumberedRequirement[], window?: readonly [number, number]) {
  const layout = layoutDrawing({ walls: wallsFromRequirements(requirements), window });
  const panel = layout.panels[0];
  if (!panel) throw new Error("a drawing has a panel");
  return { panel, layout, shapes: wallShapes(layout, panel, []) };
}

test("loss stands on the floor, rejection and reverse isolation hang, return loss hangs in the match panel, ripple has no wall", () => {
  const walls = wallsFromRequirements([
    { id: "a", lineNumber: "2.1", kind: "insertion-loss", band: [1e9, 2e9], max: 1 },
    { id: "b", lineNumber: "2.2", kind: "ripple", band: [1e9, 2e9], max: 0.5 },
    rejection("c", "3.1", [3e9, 4e9], 50),
    { id: "d", lineNumber: "3.2", kind: "reverse-isolation", band: [1e9, 2e9], min: 20 },
    { id: "e", lineNumber: "4.1", kind: "return-loss", port: 2, band: [1e9, 2e9], min: 16 },
  ]);
  expect(walls.map(({ lineNumbers, side, panel, parameters }) => [lineNumbers[0], side, panel, parameters[0]])).toEqual(
    [
      ["2.1", "floor", "transmission", "s21"],
      ["3.1", "ceiling", "transmission", "s21"],
      ["3.2", "ceiling", "transmission", "s12"],
      ["4.1", "ceiling", "match", "s22"],
    ],
  );
});

test("return loss of both ports with one limit is one wall with both numbers, bounding both parameters", () => {
  const walls = wallsFromRequirements([
    { id: "a", lineNumber: "4.1", kind: "return-loss", port: 1, band: [1e9, 2e9], min: 16 },
    { id: "b", lineNumber: "4.2", kind: "return-loss", port: 2, band: [1e9, 2e9], min: 16 },
    { id: "c", lineNumber: "4.3", kind: "return-loss", port: 2, band: [1e9, 2e9], min: 17 },
  ]);
  expect(walls.map((wall) => wall.lineNumbers)).toEqual([["4.1", "4.2"], ["4.3"]]);
  expect(walls[0]?.parameters).toEqual(["s11", "s22"]);
});

test("passbands that overlap are one", () => {
  const loss = (id: string, band: readonly [number, number]): NumberedRequirement => {
    return { id, lineNumber: id, kind: "insertion-loss", band, max: 1 };
  };
  expect(passbands(wallsFromRequirements([loss("a", [5, 7]), loss("b", [1, 3]), loss("c", [2, 4])]))).toEqual([
    [1, 4],
    [5, 7],
  ]);
});

test("no side is drawn where walls touch; the deeper one keeps what sticks out below its neighbour", () => {
  const { panel, layout, shapes } = shapesOf([
    rejection("a", "3.1", [1e9, 2e9], 55),
    rejection("b", "3.2", [2e9, 3e9], 30),
    { id: "c", lineNumber: "2.1", kind: "insertion-loss", band: [4e9, 5e9], max: 1 },
  ]);
  const [deep, shallow, pillar] = shapes;
  expect(deep?.sides).toEqual([
    { x: layout.toX(2e9), from: panel.level.toPixel(55), to: panel.level.toPixel(30), outward: 1 },
  ]);
  expect(shallow?.sides.map((side) => [side.x, side.to])).toEqual([[layout.toX(3e9), panel.top]]);
  expect(pillar?.sides.map((side) => side.to)).toEqual([panel.bottom, panel.bottom]);
});

test("two limits over one band keep their outer sides", () => {
  const { panel, shapes } = shapesOf([
    rejection("a", "3.1", [2e9, 3e9], 55),
    rejection("b", "3.2", [2e9, 3e9], 40),
    rejection("c", "3.3", [0.5e9, 1e9], 40),
    rejection("d", "3.4", [4e9, 5e9], 40),
  ]);
  expect(shapes[0]?.sides.map((side) => side.to)).toEqual([panel.top, panel.top]);
});

test("a wall cut off by the frame has no side there, and one that only touches the window is not drawn", () => {
  const { shapes } = shapesOf(
    [
      rejection("a", "3.1", [1e9, 2e9], 55),
      rejection("b", "3.2", [3e9, 4e9], 55),
      { id: "c", lineNumber: "2.1", kind: "insertion-loss", band: [2.2e9, 2.6e9], max: 1 },
    ],
    [1.5e9, 3e9],
  );
  expect(shapes.map((shape) => [shape.label, shape.sides.length])).toEqual([
    ["3.1", 1],
    ["2.1", 2],
  ]);
});

test("a spot requirement is a wall of a few pixels", () => {
  const { layout, shapes } = shapesOf([rejection("a", "3.1", [2e9, 2e9], 55), rejection("b", "3.2", [3e9, 4e9], 55)]);
  const edge = shapes[0]?.edge ?? [];
  expect(edge[0]?.x).toBeGreaterThanOrEqual(layout.toX(2e9) - 2);
  expect((edge.at(-1)?.x ?? 0) - (edge[0]?.x ?? 0)).toBeGreaterThan(1);
});

test("the number stands 24 px inside a level edge", () => {
  const { panel, shapes } = shapesOf([rejection("a", "3.1", [1e9, 2e9], 55)]);
  const pill = shapes[0]?.pill;
  expect(((pill?.top ?? 0) + (pill?.bottom ?? 0)) / 2).toBeCloseTo(panel.level.toPixel(55) - 24, 9);
});

test("a relative limit counts from the least loss of the reported curve within its reference band", () => {
  const walls = wallsFromRequirements([
    { id: "a", lineNumber: "3.1", kind: "rejection", band: [3e9, 4e9], min: 50, relativeTo: [1e9, 2e9] },
  ]);
  const trace = {
    id: "t",
    label: "S21",
    parameter: "s21" as const,
    emphasis: "worst" as const,
    frequency: [1e9, 1.5e9, 2e9, 4e9],
    level: [0.9, 0.6, 0.8, 70],
  };
  expect(layoutDrawing({ walls, traces: [trace] }).walls[0]?.limit).toBe(50.6);
  expect(layoutDrawing({ walls }).walls[0]?.limit).toBe(50);
});
