import type { Certainty } from "./analysis";
import type { Element, ElementOf, InsulationGrade } from "./energy-map";
import type { MapView } from "./map-view";

/**
 * The map as a graph. Nodes are terminals. Links join them inside an element or along a conductor. Transfers carry energy
 * from one pair of poles to another (supply, transformer, charger, converter) without joining them.
 */

export type LinkKind =
  | "wire"
  /** Fuse, breaker, thermal cut-out, protection board: closed unless it has opened. */
  | "protector"
  | "contact"
  | "diode"
  /** Input and output joined inside a converter without insulation. */
  | "common"
  /** Lets current through, but is no plain joint: load, lamp, winding, input of a supply. */
  | "consumer"
  /** Capacitor or bleeder across two poles. */
  | "shunt";

export interface Link {
  a: number;
  b: number;
  kind: LinkKind;
  element: string | null;
  conductor: string | null;
  /** "forward": conventional current from a to b only. */
  direction: "both" | "forward";
  certainty: Certainty;
  /** For a contact: the position of its switch in which it is closed. */
  closedWhen: "on" | "off" | null;
}

export type Domain = "mains" | "ac" | "dc";

/** Two poles with a voltage between them. For alternating voltage "hot" is the line side. */
export interface Supply {
  element: string;
  domain: Domain;
  hot: number;
  ret: number;
}

export interface Transfer {
  element: string;
  mode: "forward" | "backward";
  certainty: Certainty;
  from: Supply;
  to: Supply;
}

export interface Circuit {
  view: MapView;
  links: Link[];
  /** Links at each node, by index. */
  linksAt: number[][];
  transfers: Transfer[];
  /** Mains inlets, batteries and DC inlets. */
  sources: Supply[];
  switches: ElementOf<"switch">[];
}

/** Builds the graph of a map. */
export function circuitOf(view: MapView): Circuit {
  const links: Link[] = [];
  const transfers: Transfer[] = [];
  const sources: Supply[] = [];
  for (const element of view.elements.values()) {
    links.push(...innerLinks(view, element));
    transfers.push(...transfersOf(view, element));
    const source = sourceOf(view, element);
    if (source !== null) sources.push(source);
  }
  for (const { id, from, to } of view.wired) {
    links.push({
      a: view.nodeOf(from.element, from.terminal),
      b: view.nodeOf(to.element, to.terminal),
      kind: "wire",
      element: null,
      conductor: id,
      direction: "both",
      certainty: "certain",
      closedWhen: null,
    });
  }
  const linksAt: number[][] = Array.from({ length: view.nodeCount }, () => []);
  links.forEach(({ a, b }, index) => {
    linksAt[a]?.push(index);
    linksAt[b]?.push(index);
  });
  return { view, links, linksAt, transfers, sources, switches: view.ofKind("switch") };
}

function linkMaker(view: MapView, element: Element) {
  return (from: string, to: string, kind: LinkKind, rest: Partial<Link> = {}): Link => ({
    a: view.nodeOf(element.id, from),
    b: view.nodeOf(element.id, to),
    kind,
    element: element.id,
    conductor: null,
    direction: "both",
    certainty: "certain",
    closedWhen: null,
    ...rest,
  });
}

const consumerEnds = (supply: "mains" | "dc"): [string, string] =>
  supply === "mains" ? ["L", "N"] : ["+", "-"];

/** Input and output of a stage share a pole when nothing insulates them; when that is not known they may. */
function commonLink(
  link: ReturnType<typeof linkMaker>,
  grade: InsulationGrade,
  from: string,
  to: string,
): Link[] {
  if (grade === "none") return [link(from, to, "common")];
  return grade === "unknown" ? [link(from, to, "common", { certainty: "possible" })] : [];
}

function innerLinks(view: MapView, element: Element): Link[] {
  const link = linkMaker(view, element);
  switch (element.kind) {
    case "fuse":
    case "thermal-cutout":
      return [link("1", "2", "protector")];
    case "breaker":
      return polesOf(element).map((pole) => link(`${pole}a`, `${pole}b`, "protector"));
    case "bms":
      return [link("B+", "P+", "protector"), link("B-", "P-", "protector")];
    case "switch":
      return polesOf(element).flatMap((pole) =>
        element.throw === "single"
          ? [link(`${pole}a`, `${pole}b`, "contact", { closedWhen: "on" })]
          : [
              link(`${pole}c`, `${pole}a`, "contact", { closedWhen: "on" }),
              link(`${pole}c`, `${pole}b`, "contact", { closedWhen: "off" }),
            ],
      );
    case "diode":
      return [link("A", "K", "diode", { direction: "forward" })];
    case "ideal-diode":
      return [
        link("in", "out", "diode", { direction: element.blocksReverse === "no" ? "both" : "forward" }),
        ...(element.blocksReverse === "unknown"
          ? [link("out", "in", "diode", { direction: "forward", certainty: "possible" })]
          : []),
      ];
    case "load":
    case "fan":
    case "outlet":
      return [link(...consumerEnds(element.supply), "consumer")];
    case "indicator":
      return [link("1", "2", "consumer")];
    case "bleeder":
    case "x-capacitor":
      return [link("1", "2", "shunt")];
    case "isolated-supply":
      return [link("L", "N", "consumer"), ...commonLink(link, element.insulation, "N", "-")];
    case "transformer":
      return [link("L", "N", "consumer"), ...commonLink(link, element.insulation, "N", "S2")];
    case "charger":
      return element.supply === "mains"
        ? [link("L", "N", "consumer"), ...commonLink(link, element.insulation, "N", "-")]
        : [link("in+", "in-", "consumer"), ...commonLink(link, element.insulation, "in-", "-")];
    case "converter":
      return [
        link("in+", "in-", "consumer"),
        ...commonLink(link, element.insulation, "in-", element.output === "mains" ? "N" : "-"),
      ];
    case "battery":
      // Current from elsewhere can pass through it as a charging current.
      return [link("+", "-", "consumer")];
    case "mains-inlet":
    case "dc-inlet":
    case "y-capacitor":
    case "accessible-part":
    case "earth-terminal":
      return [];
  }
}

const polesOf = ({ poles }: { poles: number }) => Array.from({ length: poles }, (_, index) => index + 1);

function sourceOf(view: MapView, element: Element): Supply | null {
  switch (element.kind) {
    case "mains-inlet":
      return supply(view, element.id, "mains", "L", "N");
    case "battery":
    case "dc-inlet":
      return supply(view, element.id, "dc", "+", "-");
    default:
      return null;
  }
}

function supply(view: MapView, id: string, domain: Domain, hot: string, ret: string): Supply {
  return { element: id, domain, hot: view.nodeOf(id, hot), ret: view.nodeOf(id, ret) };
}

function transfersOf(view: MapView, element: Element): Transfer[] {
  const pair = (domain: Domain, hot: string, ret: string) => supply(view, element.id, domain, hot, ret);
  const mains = () => pair("mains", "L", "N");
  switch (element.kind) {
    case "isolated-supply":
      return bothWays(element.id, mains(), pair("dc", "+", "-"), element.conductsBackwards);
    case "transformer":
      // A transformer works either way round; it passes alternating voltage only.
      return bothWays(element.id, mains(), pair("ac", "S1", "S2"), "yes");
    case "charger":
      return bothWays(
        element.id,
        element.supply === "mains" ? mains() : pair("dc", "in+", "in-"),
        pair("dc", "+", "-"),
        element.conductsBackwards,
      );
    case "converter":
      return bothWays(
        element.id,
        pair("dc", "in+", "in-"),
        element.output === "mains" ? mains() : pair("dc", "+", "-"),
        element.conductsBackwards,
      );
    default:
      return [];
  }
}

function bothWays(
  element: string,
  input: Supply,
  output: Supply,
  backwards: "yes" | "no" | "unknown",
): Transfer[] {
  const forward: Transfer = { element, mode: "forward", certainty: "certain", from: input, to: output };
  if (backwards === "no") return [forward];
  return [
    forward,
    {
      element,
      mode: "backward",
      certainty: backwards === "yes" ? "certain" : "possible",
      from: output,
      to: input,
    },
  ];
}
