import type { Verdict3 } from "./analysis";
import type { Circuit, Link } from "./circuit";
import { squareMillimetres } from "./conductor-data";
import { earthRoots } from "./earth-net";
import type { Conductor, Element } from "./energy-map";
import { figure } from "./figure";
import type { MapView } from "./map-view";
import { list } from "./wording";

export interface Bonding {
  part: string;
  /** Joined to earth by protective conductors alone, each large enough. */
  bonded: boolean;
  verdict: Verdict3;
  /** How it is joined, or why that is not enough. */
  text: string;
  /** Devices through which alone it is joined: an earth that can be opened. */
  through: string[];
  conductors: string[];
}

/**
 * For each part, terminal and contact that belongs to earth how it is joined to where earth begins: the earth pin, or in a
 * unit without a mains inlet its own earth terminal. Only conductors called protective earth count, each with at least the
 * cross-section of the largest mains conductor (IEC 60364-5-54, 543.1, up to 16 mm², from memory).
 */
export function bondingOf(circuit: Circuit): Map<string, Bonding> {
  const { view } = circuit;
  const found = new Map<string, Bonding>();
  const ways = waysOf(circuit);
  for (const target of earthTargets(view)) {
    if (target.optional === true && (circuit.linksAt[target.node] ?? []).length === 0) continue;
    const judged = judge(circuit, ways, target);
    found.set(target.id, { part: target.id, bonded: judged.verdict === "pass", ...judged });
  }
  return found;
}

interface Target {
  id: string;
  node: number;
  name: string;
  /** It need not be joined: a supply that may do without an earth; `null` when that is not known. */
  optional: boolean | null;
}

function earthTargets(view: MapView): Target[] {
  return [...view.elements.values()].flatMap((element): Target[] => {
    const at = (terminal: string, name: string, optional: boolean | null = false): Target[] => [
      { id: element.id, node: view.nodeOf(element.id, terminal), name, optional },
    ];
    switch (element.kind) {
      case "accessible-part":
        return at("surface", view.name(element.id));
      case "earth-terminal":
        return at("PE", view.name(element.id));
      case "mains-inlet":
        return element.earthPin === "no" ? [] : at("PE", `the earth pin of ${view.name(element.id)}`);
      case "outlet":
        return element.supply === "mains" ? at("PE", `the earth contact of ${view.name(element.id)}`) : [];
      case "isolated-supply":
      case "charger":
        return element.kind === "charger" && element.supply === "dc"
          ? []
          : at("PE", `the earth terminal of ${view.name(element.id)}`, mayFloat(element));
      default:
        return [];
    }
  });
}

/** A supply whose maker states no leakage to earth has no connection to it. */
const mayFloat = ({ leakageMilliamps }: Extract<Element, { leakageMilliamps: number | null }>) =>
  leakageMilliamps === null ? null : leakageMilliamps === 0;

type Came = Map<number, number>;
interface Ways {
  /** Protective conductors known to be large enough. */
  sound: Came;
  /** With those of unknown cross-section. */
  doubtful: Came;
  /** With those that are too thin. */
  earth: Came;
  /** Any conductors. */
  wires: Came;
  /** Through devices too. */
  devices: Came;
  roots: ReadonlySet<number>;
  neededMm2: number | null;
}

function waysOf(circuit: Circuit): Ways {
  const { view } = circuit;
  const roots = earthRoots(view).map(({ node }) => node);
  const neededMm2 = largestMainsArea(view);
  const conductorOf = ({ conductor }: Link) => view.conductors.get(conductor ?? "");
  const isEarth = (link: Link) => link.kind === "wire" && conductorOf(link)?.circuit === "earth";
  const enough = (link: Link): boolean | null => {
    const area = areaOfId(view, link.conductor ?? "");
    return area === null || neededMm2 === null ? null : area >= neededMm2 - 1e-9;
  };
  const joining = new Set(["wire", "protector", "contact", "diode"]);
  return {
    sound: spread(circuit, roots, (link) => isEarth(link) && enough(link) === true),
    doubtful: spread(circuit, roots, (link) => isEarth(link) && enough(link) !== false),
    earth: spread(circuit, roots, isEarth),
    wires: spread(circuit, roots, ({ kind }) => kind === "wire"),
    devices: spread(circuit, roots, ({ kind }) => joining.has(kind)),
    roots: new Set(roots),
    neededMm2,
  };
}

/** Of the conductors called mains, mm²; `null` when one of them is not known, or there is none. */
function largestMainsArea({ wired }: MapView): number | null {
  const areas = wired.filter(({ circuit }) => circuit === "mains").map(squareMillimetres);
  const known = areas.filter((area) => area !== null);
  return known.length === 0 || known.length < areas.length ? null : Math.max(...known);
}

type Judged = Pick<Bonding, "verdict" | "text" | "through" | "conductors">;

function judge(circuit: Circuit, ways: Ways, { node, name, optional }: Target): Judged {
  const { view } = circuit;
  const from = originName(view);
  const said = (verdict: Verdict3, text: string, way: Way = { elements: [], conductors: [] }): Judged => ({
    verdict,
    text: text.charAt(0).toUpperCase() + text.slice(1),
    through: way.elements,
    conductors: way.conductors,
  });
  if (ways.roots.has(node)) return rootJudged(circuit, name, node, said);
  if (ways.doubtful.has(node)) {
    const sure = ways.sound.has(node);
    const way = trace(circuit, sure ? ways.sound : ways.doubtful, node);
    const by = `${name} is joined to ${from} by ${list(way.conductors)}`;
    const pins = uncertainPins(view);
    if (pins.length > 0)
      return said("unknown", `${by}, but whether ${list(pins)} has an earth pin is not known.`, way);
    return sure
      ? said("pass", `${by}.`, way)
      : said("unknown", `${by}, but ${unknownAreas(view, way.conductors, ways.neededMm2)}.`, way);
  }
  if (ways.earth.has(node)) {
    const way = trace(circuit, ways.earth, node);
    const thin = way.conductors.filter((id) => (areaOfId(view, id) ?? Infinity) < (ways.neededMm2 ?? 0));
    return said(
      "fail",
      `${name} is joined to ${from} by ${list(way.conductors)}, but ${list(thin.map((id) => areaText(view, id)))} is thinner than the ${figure(ways.neededMm2 ?? 0)} mm² of the mains conductors.`,
      way,
    );
  }
  if (ways.wires.has(node)) {
    const way = trace(circuit, ways.wires, node);
    const others = way.conductors.filter((id) => view.conductors.get(id)?.circuit !== "earth");
    return said(
      "fail",
      `${name} is joined to ${from} only by ${list(others)}, no protective conductor on the map.`,
      { elements: [], conductors: way.conductors },
    );
  }
  const way = trace(circuit, ways.devices, node);
  if (way.elements.length > 0)
    return said(
      "fail",
      `${name} is joined to earth only through ${list(way.elements.map((id) => view.name(id)))}.`,
      way,
    );
  if (optional === null && (circuit.linksAt[node] ?? []).length === 0)
    return said("unknown", `${name} is not joined to ${from}, and whether it needs to be is not known.`);
  return said("fail", `${name} is not joined to ${from}.`);
}

/** Where earth begins is right when something is joined to it. */
function rootJudged(
  circuit: Circuit,
  name: string,
  node: number,
  said: (verdict: Verdict3, text: string) => Judged,
): Judged {
  const joined = (circuit.linksAt[node] ?? []).flatMap((index) => {
    const conductor = circuit.view.conductors.get(circuit.links[index]?.conductor ?? "");
    return conductor?.circuit === "earth" ? [conductor.id] : [];
  });
  return joined.length > 0
    ? { ...said("pass", `From ${name} leads ${list(joined)}.`), conductors: joined }
    : said("fail", `${name} is joined to no protective conductor.`);
}

/** What parts must be joined to, in words. */
export function originName(view: MapView): string {
  return view.ofKind("mains-inlet").length > 0 ? "the earth pin" : "the unit's earth terminal";
}

const uncertainPins = (view: MapView): string[] =>
  view.ofKind("mains-inlet").flatMap(({ id, earthPin }) => (earthPin === "unknown" ? [view.name(id)] : []));

function unknownAreas(view: MapView, ids: string[], neededMm2: number | null): string {
  const unknown = ids.filter((id) => areaOfId(view, id) === null);
  if (unknown.length > 0) return `the cross-section of ${list(unknown)} is not known`;
  return neededMm2 === null
    ? "how large the mains conductors are, which it must equal, is not known"
    : "its cross-section is not known";
}

function areaOfId(view: MapView, id: string): number | null {
  const conductor = view.conductors.get(id);
  return conductor === undefined ? null : squareMillimetres(conductor);
}
const areaText = (view: MapView, id: string) => `${id} of ${figure(areaOfId(view, id) ?? 0)} mm²`;

/** Devices that sit in a conductor marked as protective earth: none belongs there. */
export function devicesInEarth({ view }: Circuit): string[] {
  const interrupting = new Set(["switch", "fuse", "breaker", "thermal-cutout", "diode", "ideal-diode"]);
  const ids = view.wired
    .filter(({ circuit }) => circuit === "earth")
    .flatMap(({ from, to }: Conductor) => [from.element, to.element])
    .filter((id) => interrupting.has(view.elements.get(id)?.kind ?? ""));
  return [...new Set(ids)];
}

function spread(circuit: Circuit, starts: number[], allowed: (link: Link) => boolean): Came {
  const came: Came = new Map(starts.map((node) => [node, -1]));
  for (const node of came.keys()) {
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined || !allowed(link)) continue;
      const next = link.a === node ? link.b : link.a;
      if (!came.has(next)) came.set(next, index);
    }
  }
  return came;
}

interface Way {
  elements: string[];
  conductors: string[];
}

function trace(circuit: Circuit, came: Came, node: number): Way {
  const elements: string[] = [];
  const conductors: string[] = [];
  let at = node;
  for (let guard = 0; guard <= came.size; guard++) {
    const link = circuit.links[came.get(at) ?? -1];
    if (link === undefined) break;
    if (link.element !== null) elements.unshift(link.element);
    if (link.conductor !== null) conductors.unshift(link.conductor);
    at = link.a === at ? link.b : link.a;
  }
  return { elements, conductors };
}
