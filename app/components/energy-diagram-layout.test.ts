import { expect, test } from "vitest";

import { demoMaps } from "~/engine/demo-maps";
import { starterMaps } from "~/engine/starter-maps";
import { without } from "~/engine/map-builder";

import { layoutDiagram } from "./energy-diagram-layout";

const maps = [...starterMaps.map(({ key, map }) => [key, map] as const), ...Object.entries(demoMaps)];

test.each(maps)(
  "%s: no two boxes overlap, every line ends at its two terminals and stays on the sheet",
  (_name, map) => {
    const { nodes, wires, width, height } = layoutDiagram(map);
    expect(nodes.map(({ id }) => id)).toEqual(map.elements.map(({ id }) => id));
    expect(wires.map(({ id }) => id)).toEqual(map.conductors.map(({ id }) => id));
    nodes.forEach((a, index) => {
      for (const b of nodes.slice(index + 1)) {
        const apart =
          a.x + a.width <= b.x || b.x + b.width <= a.x || a.y + a.height <= b.y || b.y + b.height <= a.y;
        expect([a.id, b.id, apart]).toEqual([a.id, b.id, true]);
      }
    });
    for (const { id, path } of wires) {
      const conductor = map.conductors.find((each) => each.id === id);
      const at = (end: { element: string; terminal: string } | undefined) => {
        const port = nodes
          .find((node) => node.id === end?.element)
          ?.ports.find(({ terminal }) => terminal === end?.terminal);
        return port === undefined ? null : { x: port.x, y: port.y };
      };
      expect(path[0]).toEqual(at(conductor?.from));
      expect(path.at(-1)).toEqual(at(conductor?.to));
      for (const { x, y } of path) {
        expect(x).toBeGreaterThanOrEqual(0);
        expect(x).toBeLessThanOrEqual(width);
        expect(y).toBeLessThanOrEqual(height);
      }
    }
  },
);

test("sources stand left of what they feed", () => {
  const { nodes } = layoutDiagram(demoMaps.soundLamp);
  const x = (id: string) => nodes.find((node) => node.id === id)?.x ?? 0;
  expect(x("X1")).toBeLessThan(x("F1"));
  expect(x("F1")).toBeLessThan(x("S1"));
  expect(x("PS1")).toBeLessThan(x("LD1"));
});

test("conductors get the roles that their colours stand for", () => {
  const roles = new Map(layoutDiagram(demoMaps.sound).wires.map(({ id, role }) => [id, role]));
  expect(["W1", "W3", "W8", "W9", "WE1"].map((id) => roles.get(id))).toEqual([
    "line",
    "neutral",
    "plus",
    "minus",
    "earth",
  ]);
});

test("half-made maps are drawn too", () => {
  const half = without(demoMaps.sound, "S1", "BT1", "X1");
  expect(layoutDiagram(half).nodes).toHaveLength(half.elements.length);
  const dangling = { ...demoMaps.sound, elements: demoMaps.sound.elements.slice(0, 3) };
  expect(layoutDiagram(dangling).nodes).toHaveLength(3);
  expect(layoutDiagram({ ...demoMaps.sound, elements: [], conductors: [] }).wires).toEqual([]);
});
