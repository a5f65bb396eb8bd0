import { Graph, layout } from "@dagrejs/dagre";

import { conductorRoles, type ConductorRole } from "~/engine/conductor-roles";
import { terminalsOf } from "~/engine/elements";
import type { Element, EnergyMap } from "~/engine/energy-map";
import { figure } from "~/engine/figure";
import { viewOf } from "~/engine/map-view";

/** Where everything of a diagram goes: sources on the left, what uses the energy on the right. Plain numbers, no drawing. */

export interface DiagramPoint {
  x: number;
  y: number;
}

export interface DiagramPort extends DiagramPoint {
  terminal: string;
  side: "left" | "right";
  joined: boolean;
}

export interface DiagramNode extends DiagramPoint {
  id: string;
  element: Element;
  lines: string[];
  width: number;
  height: number;
  ports: DiagramPort[];
}

export interface DiagramWire {
  id: string;
  role: ConductorRole;
  from: string;
  to: string;
  path: DiagramPoint[];
  labelAt: DiagramPoint;
}

export interface Diagram {
  width: number;
  height: number;
  nodes: DiagramNode[];
  wires: DiagramWire[];
}

const boxWidth = 132;
const portPitch = 20;
const headHeight = 46;
const margin = 16;

type Side = "left" | "right";

/** Lays a map out. The same map always gives the same drawing. */
export function layoutDiagram(map: EnergyMap): Diagram {
  const view = viewOf(map);
  const elements = [...view.elements.values()];
  const roles = conductorRoles(map);
  const rank = ranksOf(map, roles);
  // First with sides guessed from the ranks, then with sides taken from where the neighbours came to lie.
  const rough = place(elements, map, rank, roles, (id, terminal) => guessSide(map, rank, id, terminal));
  const nodes = place(elements, map, rank, roles, (id, terminal) =>
    sideByNeighbours(map, rough, id, terminal),
  );
  const wires = view.wired.map((conductor, index): DiagramWire => {
    const start = portOf(nodes, conductor.from.element, conductor.from.terminal);
    const end = portOf(nodes, conductor.to.element, conductor.to.terminal);
    const path = route(nodes, start, end, index);
    return {
      id: conductor.id,
      role: roles.get(conductor.id) ?? "other",
      from: `${conductor.from.element}.${conductor.from.terminal}`,
      to: `${conductor.to.element}.${conductor.to.terminal}`,
      path,
      labelAt: middleOf(path),
    };
  });
  const reach = [
    ...nodes.map(({ x, y, width, height }) => ({ x: x + width, y: y + height })),
    ...wires.flatMap(({ path }) => path),
  ];
  return {
    width: Math.max(0, ...reach.map(({ x }) => x)) + margin,
    height: Math.max(0, ...reach.map(({ y }) => y)) + margin,
    nodes,
    wires,
  };
}

/**
 * Steps from the nearest source along what carries line or plus, so that a switch stands before what it switches; where
 * that leads nowhere, along any conductor.
 */
function ranksOf(map: EnergyMap, roles: Map<string, ConductorRole>): Map<string, number> {
  const sources = map.elements.filter(
    ({ kind }) => kind === "mains-inlet" || kind === "battery" || kind === "dc-inlet",
  );
  const rank = new Map<string, number>(sources.map(({ id }) => [id, 0]));
  const outward = (id: string) => !["neutral", "minus", "earth"].includes(roles.get(id) ?? "other");
  spreadRanks(map, rank, outward);
  spreadRanks(map, rank, () => true);
  for (const { id } of map.elements) if (!rank.has(id)) rank.set(id, 0);
  return rank;
}

function spreadRanks(
  map: EnergyMap,
  rank: Map<string, number>,
  follow: (conductor: string) => boolean,
): void {
  const near = new Map<string, Set<string>>();
  for (const { id, from, to } of map.conductors) {
    if (!follow(id)) continue;
    near.set(from.element, (near.get(from.element) ?? new Set()).add(to.element));
    near.set(to.element, (near.get(to.element) ?? new Set()).add(from.element));
  }
  const queue = [...rank.keys()].sort((a, b) => (rank.get(a) ?? 0) - (rank.get(b) ?? 0));
  for (let head = 0; head < queue.length; head++) {
    const id = queue[head];
    if (id === undefined) break;
    for (const next of near.get(id) ?? []) {
      if (rank.has(next)) continue;
      rank.set(next, (rank.get(id) ?? 0) + 1);
      queue.push(next);
    }
  }
}

function neighbours(map: EnergyMap, id: string, terminal: string): string[] {
  return map.conductors.flatMap(({ from, to }) => [
    ...(from.element === id && from.terminal === terminal ? [to.element] : []),
    ...(to.element === id && to.terminal === terminal ? [from.element] : []),
  ]);
}

function guessSide(map: EnergyMap, rank: Map<string, number>, id: string, terminal: string): Side {
  const own = rank.get(id) ?? 0;
  const others = neighbours(map, id, terminal).map((each) => rank.get(each) ?? 0);
  if (others.length === 0) return "left";
  return others.reduce((sum, each) => sum + each, 0) / others.length > own ? "right" : "left";
}

function sideByNeighbours(map: EnergyMap, nodes: DiagramNode[], id: string, terminal: string): Side {
  const own = nodes.find((node) => node.id === id)?.x ?? 0;
  const others = neighbours(map, id, terminal).flatMap(
    (each) => nodes.find((node) => node.id === each)?.x ?? [],
  );
  if (others.length === 0) return "left";
  return others.reduce((sum, each) => sum + each, 0) / others.length > own ? "right" : "left";
}

function place(
  elements: Element[],
  map: EnergyMap,
  rank: Map<string, number>,
  roles: Map<string, ConductorRole>,
  sideOf: (id: string, terminal: string) => Side,
): DiagramNode[] {
  const graph = new Graph({ multigraph: true });
  graph.setGraph({ rankdir: "LR", nodesep: 22, ranksep: 64, marginx: margin, marginy: margin });
  graph.setDefaultEdgeLabel(() => ({}));
  const sides = new Map(
    elements.map((element) => [
      element.id,
      terminalsOf(element).map(({ name }) => ({ name, side: sideOf(element.id, name) })),
    ]),
  );
  for (const element of elements) {
    const ports = sides.get(element.id) ?? [];
    const most = Math.max(
      ports.filter(({ side }) => side === "left").length,
      ports.filter(({ side }) => side === "right").length,
      1,
    );
    graph.setNode(element.id, { width: boxWidth, height: headHeight + most * portPitch });
  }
  for (const { id, from, to } of map.conductors) {
    if (from.element === to.element || !graph.hasNode(from.element) || !graph.hasNode(to.element)) continue;
    const forward = (rank.get(from.element) ?? 0) <= (rank.get(to.element) ?? 0);
    const [tail, head] = forward ? [from.element, to.element] : [to.element, from.element];
    graph.setEdge(
      tail,
      head,
      { weight: ["earth", "neutral", "minus"].includes(roles.get(id) ?? "other") ? 1 : 3 },
      id,
    );
  }
  layout(graph);
  return elements.map((element): DiagramNode => {
    const box = graph.node(element.id);
    const width = boxWidth;
    const height = Number(box?.height ?? headHeight);
    const x = Number(box?.x ?? 0) - width / 2;
    const y = Number(box?.y ?? 0) - height / 2;
    const counts = { left: 0, right: 0 };
    const ports = (sides.get(element.id) ?? []).map(({ name, side }): DiagramPort => {
      const row = counts[side]++;
      return {
        terminal: name,
        side,
        joined: neighbours(map, element.id, name).length > 0,
        x: side === "left" ? x : x + width,
        y: y + headHeight + row * portPitch + portPitch / 2 - 4,
      };
    });
    return { id: element.id, element, lines: linesOf(element), x, y, width, height, ports };
  });
}

function portOf(nodes: DiagramNode[], id: string, terminal: string): DiagramPort {
  const port = nodes.find((node) => node.id === id)?.ports.find((each) => each.terminal === terminal);
  return port ?? { terminal, side: "left", joined: false, x: 0, y: 0 };
}

/** Right-angled way between two ports: out of each a little, then one upright run between, clear of the boxes where it can be. */
function route(nodes: DiagramNode[], start: DiagramPort, end: DiagramPort, index: number): DiagramPoint[] {
  const lane = 10 + (index % 6) * 7;
  const out = (port: DiagramPort) => port.x + (port.side === "right" ? lane : -lane);
  const a = { x: out(start), y: start.y };
  const b = { x: out(end), y: end.y };
  const facing =
    start.side !== end.side && (start.side === "right" ? a.x <= b.x + 2 * lane : b.x <= a.x + 2 * lane);
  if (facing) {
    const blocked = (x: number) =>
      nodes.some((node) => crosses(node, { x: start.x, y: b.y }, { x: end.x, y: b.y }, start, end, x));
    if (!blocked(a.x)) return tidy([start, a, { x: a.x, y: b.y }, end]);
    if (!nodes.some((node) => crosses(node, { x: start.x, y: a.y }, { x: end.x, y: a.y }, start, end, b.x))) {
      return tidy([start, { x: b.x, y: a.y }, b, end]);
    }
  }
  // Around: below or above everything that lies between the two.
  const between = nodes.filter(({ x, width }) => x < Math.max(a.x, b.x) && x + width > Math.min(a.x, b.x));
  const below = Math.max(start.y, end.y, ...between.map(({ y, height }) => y + height)) + 8 + (index % 8) * 5;
  const above = Math.min(start.y, end.y, ...between.map(({ y }) => y)) - 8 - (index % 8) * 5;
  const middle = (start.y + end.y) / 2;
  const level = above > 4 && middle - above < below - middle ? above : below;
  return tidy([start, a, { x: a.x, y: level }, { x: b.x, y: level }, b, end]);
}

/** Whether a level run would pass through a box that is not one of the ends. */
function crosses(
  node: DiagramNode,
  from: DiagramPoint,
  to: DiagramPoint,
  start: DiagramPoint,
  end: DiagramPoint,
  upright: number,
): boolean {
  const [left, right] = [Math.min(from.x, to.x), Math.max(from.x, to.x)];
  const level = from.y;
  const inBox = level > node.y - 2 && level < node.y + node.height + 2;
  const overlaps = node.x < right - 1 && node.x + node.width > left + 1;
  const hitsUpright =
    upright > node.x &&
    upright < node.x + node.width &&
    Math.min(start.y, end.y) < node.y + node.height &&
    Math.max(start.y, end.y) > node.y;
  return (inBox && overlaps) || hitsUpright;
}

/** Without points that lie on a straight run. */
function tidy(points: DiagramPoint[]): DiagramPoint[] {
  return points
    .filter((point, index) => {
      const before = points[index - 1];
      const after = points[index + 1];
      if (before === undefined || after === undefined) return true;
      const level = before.y === point.y && point.y === after.y;
      const upright = before.x === point.x && point.x === after.x;
      return !level && !upright;
    })
    .map(({ x, y }) => ({ x, y }));
}

/** Middle of the longest run, for the label. */
function middleOf(path: DiagramPoint[]): DiagramPoint {
  let best = { x: 0, y: 0 };
  let longest = -1;
  path.forEach((point, index) => {
    const next = path[index + 1];
    if (next === undefined) return;
    const length = Math.abs(next.x - point.x) + Math.abs(next.y - point.y);
    if (length > longest) {
      longest = length;
      best = { x: (point.x + next.x) / 2, y: (point.y + next.y) / 2 };
    }
  });
  return best;
}

const amps = (value: number | null) => (value === null ? "? A" : `${figure(value)} A`);
const volts = (value: number | null) => (value === null ? "? V" : `${figure(value)} V`);

/** The one line of data that helps most when reading the drawing. */
function linesOf(element: Element): string[] {
  switch (element.kind) {
    case "mains-inlet":
      return [`behind ${amps(element.upstreamAmps)}`];
    case "battery":
      return [
        `${element.cellsInSeries ?? "?"} cells, ${element.capacityAh === null ? "?" : figure(element.capacityAh)} Ah`,
      ];
    case "dc-inlet":
      return [`${volts(element.volts)} ${amps(element.maxAmps)}`];
    case "isolated-supply":
    case "converter":
      return [`${volts(element.outputVolts)} ${amps(element.outputAmps)}`];
    case "charger":
      return [`${volts(element.setPointVolts)} ${amps(element.outputAmps)}`];
    case "transformer":
      return [
        `${volts(element.secondaryVolts)}, ${element.voltAmperes === null ? "?" : figure(element.voltAmperes)} VA`,
      ];
    case "fuse":
      return [
        [amps(element.ratingAmps), letter(element.speed), letter(element.breakingLetter)]
          .filter((each) => each !== "")
          .join(" "),
      ];
    case "breaker":
    case "thermal-cutout":
      return [amps(element.ratingAmps)];
    case "load":
    case "fan":
    case "indicator":
      return [amps(element.amps)];
    case "outlet":
      return [`up to ${amps(element.maxAmps)}`];
    case "x-capacitor":
    case "y-capacitor":
      return [
        `${element.nanofarads === null ? "?" : figure(element.nanofarads)} nF ${letter(element.safetyClass)}`.trim(),
      ];
    case "bleeder":
      return [`${element.kilohms === null ? "?" : figure(element.kilohms)} kΩ`];
    default:
      return [];
  }
}

const letter = (value: string) =>
  value === "unknown" ? "?" : value === "other" || value === "none" ? "" : value;
