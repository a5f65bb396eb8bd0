import { renderToStaticMarkup } from "react-dom/server";
import { expect, test } from "vitest";

import { analyse } from "~/engine/analyse";
import { demoMaps } from "~/engine/demo-maps";
import { ruleSets } from "~/engine/rule-set";

import { EnergyDiagram } from "./energy-diagram";

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "I" } as const;
const map = demoMaps.backupSinglePole;

test("the drawing has a name, and a table says the same: what each conductor is and whether it stays live", () => {
  const html = renderToStaticMarkup(<EnergyDiagram map={map} analysis={analyse(map, rules, facts)} />);
  expect(html).toContain(
    `Energy map with ${map.elements.length} elements and ${map.conductors.length} conductors</title>`,
  );
  const row = (id: string) =>
    new RegExp(`<th scope="row"[^>]*>${id}</th>(.*?)</tr>`).exec(html)?.[1]?.replace(/<[^>]+>/g, "|") ?? "";
  expect(row("W3")).toMatch(/X1\.N.*CH1\.N.*neutral.*0\.75 mm².*\|live\|/);
  expect(row("W12")).toMatch(/plus.*\|not live\|/);
  expect(html).toContain("W3: neutral, from X1.N to CH1.N, live with every switch off");
});

test("without an analysis nothing is said of what stays live", () => {
  expect(renderToStaticMarkup(<EnergyDiagram map={map} />)).not.toMatch(
    /not live|live with every switch off/,
  );
});

test("a switch is drawn in the position given", () => {
  const html = (state: "on" | "off") =>
    renderToStaticMarkup(<EnergyDiagram map={map} switchStates={{ S1: state }} />);
  expect(html("off")).toContain(">off</text>");
  expect(html("on")).not.toContain(">off</text>");
});

test("labels are text, whatever they hold", () => {
  const odd = {
    ...map,
    elements: map.elements.map((each) => (each.id === "F1" ? { ...each, label: "<script>x" } : each)),
  };
  expect(renderToStaticMarkup(<EnergyDiagram map={odd} />)).not.toContain("<script>");
});

test("on paper it shrinks to the sheet: its own width is no bound that a print rule can't beat", () => {
  const html = renderToStaticMarkup(<EnergyDiagram map={map} />);
  const [drawing = ""] = /<svg role="img"[^>]*>/.exec(html) ?? [];
  expect(drawing).toContain("print:max-w-full");
  expect(drawing).toMatch(/class="h-auto /);
  // max-width beats any width, so the drawing's own style may set a width and nothing else.
  expect(drawing).toMatch(/style="width:clamp\([^;"]*\)"/);
});
