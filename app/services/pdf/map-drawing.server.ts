import dagre from "@dagrejs/dagre";
import { LineCapStyle, type RGB } from "pdf-lib";
import { elementKinds, terminalsOf } from "~/engine/elements";
import type { Conductor, EnergyMap } from "~/engine/energy-map";
import { CONTENT, type Paper, hex, ink, LEFT, soft, strongRule, wash } from "./paper.server";

/** Conductor colours after IEC 60445: line brown, neutral blue, earth green and yellow; DC plus red, DC minus dark. */
const colours = {
  line: hex("7b4a24"),
  neutral: hex("1f5fae"),
  earth: hex("2f7f3b"),
  earthYellow: hex("e6c700"),
  plus: hex("c0201f"),
  minus: hex("1b2126"),
  mains: hex("8a6d55"),
  elv: hex("6a7076"),
};

type Pole = "line" | "neutral" | "earth" | "plus" | "minus" | "mains" | "elv";

const TALLEST = 330;

interface Layout {
  width: number;
  height: number;
  nodes: { id: string; label: string; kind: string; x: number; y: number; width: number; height: number }[];
  edges: { id: string; pole: Pole; points: { x: number; y: number }[] }[];
}

/** Draws the map at the cursor, as large as the sheet allows, with a legend; draws nothing for an empty map. */
export function drawMap(paper: Paper, map: EnergyMap): void {
  if (map.elements.length === 0) return;
  const fits = (["LR", "TB"] as const)
    .map((direction) => layOut(paper, map, direction))
    .map((layout) => ({ layout, scale: Math.min(1, CONTENT / layout.width, TALLEST / layout.height) }));
  const best = fits.reduce((one, other) => (other.scale > one.scale * 1.05 ? other : one));
  const { layout, scale } = best;
  const height = layout.height * scale;
  paper.need(height + 26);
  const left = LEFT + (CONTENT - layout.width * scale) / 2;
  const top = paper.top();
  const place = ({ x, y }: { x: number; y: number }) => ({ x: left + x * scale, y: top - y * scale });

  for (const edge of layout.edges) drawEdge(paper, edge.points.map(place), edge.pole, scale);
  for (const edge of layout.edges) {
    const middle = edge.points[Math.floor(edge.points.length / 2)];
    if (!middle) continue;
    const { x, y } = place(middle);
    const size = 5.4 * scale;
    const width = paper.type.width(edge.id, { size });
    paper.fill(
      { x: x - width / 2 - 1, top: y + size * 0.62, width: width + 2, height: size * 1.2 },
      hex("ffffff"),
    );
    paper.lines([edge.id], x - width / 2, y + size * 0.55, { size, color: soft });
  }
  for (const node of layout.nodes) {
    const corner = place({ x: node.x - node.width / 2, y: node.y - node.height / 2 });
    const box = { x: corner.x, top: corner.y, width: node.width * scale, height: node.height * scale };
    paper.fill(box, wash);
    paper.outline(box, ink, 0.8 * Math.max(0.6, scale));
    const text = (
      value: string,
      from: number,
      size: number,
      options: { weight?: "bold"; color?: RGB } = {},
    ) => paper.lines([value], box.x + 4 * scale, box.top - from * scale, { size: size * scale, ...options });
    text(node.id, 3, 7.4, { weight: "bold" });
    text(node.label, 13, 6);
    text(node.kind, 21.5, 5.2, { color: soft });
  }
  paper.moveDown(height + 8);
  drawLegend(paper, new Set(layout.edges.map((edge) => edge.pole)));
}

function layOut(paper: Paper, map: EnergyMap, rankdir: "LR" | "TB"): Layout {
  const graph = new dagre.graphlib.Graph({ multigraph: true });
  graph.setGraph({ rankdir, nodesep: 12, ranksep: 34, edgesep: 7, marginx: 2, marginy: 2 });
  graph.setDefaultEdgeLabel(() => ({}));
  const cut = (text: string) => (text.length > 24 ? `${text.slice(0, 23)}…` : text);
  const nodes = map.elements.map((element) => {
    const label = cut(element.label);
    const kind = cut(elementKinds[element.kind].label);
    const width =
      8 +
      Math.max(
        30,
        paper.type.width(element.id, { size: 7.4, weight: "bold" }),
        paper.type.width(label, { size: 6 }),
        paper.type.width(kind, { size: 5.2 }),
      );
    return { id: element.id, label, kind, width, height: 31 };
  });
  for (const { id, width, height } of nodes) graph.setNode(id, { width, height });
  const known = new Set(nodes.map((node) => node.id));
  const drawn = map.conductors.filter(({ from, to }) => known.has(from.element) && known.has(to.element));
  for (const { id, from, to } of drawn) graph.setEdge(from.element, to.element, {}, id);
  dagre.layout(graph);
  const poleOf = polesOf(map);
  const { width = 1, height = 1 } = graph.graph();
  return {
    width,
    height,
    nodes: nodes.map((node) => {
      const { x, y } = graph.node(node.id);
      return { ...node, x, y };
    }),
    edges: drawn.map((conductor) => ({
      id: conductor.id,
      pole: poleOf(conductor),
      points: graph.edge(conductor.from.element, conductor.to.element, conductor.id).points ?? [],
    })),
  };
}

/**
 * Which pole each conductor belongs to, as far as a terminal of its net tells (a net passes through fuses, switches and
 * diodes); else its circuit. For colours only.
 */
function polesOf(map: EnergyMap): (conductor: Conductor) => Pole {
  const parents = new Map<string, string>();
  const rootOf = (key: string): string => {
    const parent = parents.get(key);
    return parent === undefined ? key : rootOf(parent);
  };
  const join = (one: string, other: string) => {
    const [a, b] = [rootOf(one), rootOf(other)];
    if (a !== b) parents.set(a, b);
  };
  const keyOf = (element: string, terminal: string) => `${element} ${terminal}`;
  for (const { from, to } of map.conductors) {
    join(keyOf(from.element, from.terminal), keyOf(to.element, to.terminal));
  }
  const roles = new Map<string, Set<Pole>>();
  for (const element of map.elements) {
    const terminals = terminalsOf(element);
    if (passesThrough.has(element.kind)) {
      for (const [one, other] of pairs(terminals.map((terminal) => terminal.name))) {
        join(keyOf(element.id, one), keyOf(element.id, other));
      }
    }
  }
  for (const element of map.elements) {
    for (const { name, role } of terminalsOf(element)) {
      if (role === "any") continue;
      const root = rootOf(keyOf(element.id, name));
      roles.set(root, (roles.get(root) ?? new Set<Pole>()).add(role));
    }
  }
  return ({ circuit, from }) => {
    if (circuit === "earth") return "earth";
    const found = [...(roles.get(rootOf(keyOf(from.element, from.terminal))) ?? [])];
    const [only] = found;
    return only !== undefined && found.length === 1 ? only : circuit;
  };
}

const passesThrough = new Set(["fuse", "thermal-cutout", "breaker", "switch", "diode", "ideal-diode"]);

/** Terminals of one pole: "1a" with "1b", and both ends of a part that has only two. */
function pairs(names: readonly string[]): [string, string][] {
  const [first, second, ...rest] = names;
  if (first !== undefined && second !== undefined && rest.length === 0) return [[first, second]];
  return names.flatMap((one, index) =>
    names
      .slice(index + 1)
      .filter((other) => other.slice(0, -1) === one.slice(0, -1))
      .map((other): [string, string] => [one, other]),
  );
}

function drawEdge(
  paper: Paper,
  points: readonly { x: number; y: number }[],
  pole: Pole,
  scale: number,
): void {
  const thickness = 1.3 * Math.max(0.55, scale);
  points.slice(1).forEach((end, index) => {
    const start = points[index];
    if (!start) return;
    const stroke = { start, end, thickness, lineCap: LineCapStyle.Round };
    paper.page().drawLine({ ...stroke, color: colours[pole] });
    if (pole === "earth") {
      const dashes = { dashArray: [3 * scale, 3 * scale], lineCap: LineCapStyle.Butt };
      paper.page().drawLine({ ...stroke, ...dashes, color: colours.earthYellow });
    }
  });
}

const legends: Record<Pole, string> = {
  line: "line (brown)",
  neutral: "neutral (blue)",
  earth: "protective earth (green and yellow)",
  plus: "DC plus (red)",
  minus: "DC minus (black)",
  mains: "other mains conductor",
  elv: "other low-voltage conductor",
};

function drawLegend(paper: Paper, poles: ReadonlySet<Pole>): void {
  const order: Pole[] = ["line", "neutral", "mains", "earth", "plus", "minus", "elv"];
  let x = LEFT;
  let top = paper.top();
  for (const pole of order.filter((each) => poles.has(each))) {
    const width = paper.type.width(legends[pole], { size: 6.6 });
    if (x > LEFT && x + 18 + width > LEFT + CONTENT) {
      x = LEFT;
      top -= 10;
    }
    const ends = [
      { x, y: top - 5 },
      { x: x + 14, y: top - 5 },
    ];
    drawEdge(paper, ends, pole, 1);
    paper.lines([legends[pole]], x + 18, top - 1, { size: 6.6, color: soft });
    x += 28 + width;
  }
  paper.moveDown(paper.top() - top + 14);
  paper.line(LEFT, paper.top() + 2, LEFT + CONTENT, paper.top() + 2, strongRule, 0.4);
  paper.moveDown(6);
}
