import type { Join } from "./analysis";
import { findBridges } from "./bridges";
import type { Circuit } from "./circuit";
import { reachThroughParts } from "./crossings";
import {
  earthedNodes,
  earthElement,
  earthTerminals,
  isNeutralEarthed,
  type EarthTerminal,
} from "./earth-net";
import type { MapView } from "./map-view";
import { list } from "./wording";
import { conduction, configurations, energise, isReached, type Instance, type Position } from "./energise";

/**
 * Shorts, mains joined with extra-low voltage, and live accessible parts or earth, in any position of the switches, each with
 * the fewest switches on. Closing a contact only ever joins more, so it is enough to look with every on-off switch on, for
 * each position of the changeovers, and then to turn off what a join does not need.
 */
export function findJoins(circuit: Circuit): Join[] {
  const joins = new Map<string, Join>();
  for (const includePossible of [false, true]) {
    if (includePossible && !hasDoubt(circuit)) break;
    for (const positions of configurations(circuit, () => null)) {
      for (const { id } of find(circuit, positions, includePossible)) {
        if (joins.has(id)) continue;
        const fewest = withFewestOn(circuit, positions, id, includePossible);
        const join = find(circuit, fewest, includePossible).find((each) => each.id === id);
        if (join !== undefined) joins.set(id, join);
      }
    }
  }
  return [...joins.values(), ...findBridges(circuit)];
}

const hasDoubt = ({ links, transfers, view }: Circuit) =>
  links.some(({ certainty }) => certainty === "possible") ||
  transfers.some(({ certainty }) => certainty === "possible") ||
  view.ofKind("y-capacitor").some(({ safetyClass }) => safetyClass === "unknown");

function withFewestOn(
  circuit: Circuit,
  start: ReadonlyMap<string, Position>,
  id: string,
  includePossible: boolean,
): ReadonlyMap<string, Position> {
  let positions = start;
  for (const element of circuit.switches) {
    const fewer = new Map(positions).set(element.id, "off");
    if (find(circuit, fewer, includePossible).some((each) => each.id === id)) positions = fewer;
  }
  return positions;
}

function find(circuit: Circuit, positions: ReadonlyMap<string, Position>, includePossible: boolean): Join[] {
  const condition = { positions, includePossible };
  const conducts = conduction(circuit, condition);
  const live = circuit.sources.flatMap((source) =>
    energise(circuit, source, condition, conducts).instances.map((instance) => ({
      source: source.element,
      instance,
    })),
  );
  const search: Search = {
    circuit,
    conducts,
    includePossible,
    earths: earthTerminals(circuit.view),
    earthed: earthedNodes(circuit),
    low: live.map(({ instance }) => instance).filter(({ supply }) => supply.domain !== "mains"),
  };
  const findings = live.flatMap(({ source, instance }) =>
    [
      ...shortOf(search, instance),
      ...(instance.supply.domain === "mains" ? mainsJoins(search, instance) : liveParts(search, instance)),
    ].map((finding) => ({ source, ...finding })),
  );
  const switchesOn = [...positions].filter(([, position]) => position === "on").map(([id]) => id);
  const joins = findings.map(({ kind, source, other, through = [], conductors = [] }): Join => ({
    id: [kind, source, other, ...(through.length > 0 ? ["through a part"] : [])].join(" "),
    kind,
    source,
    other,
    through,
    switchesOn,
    conductors,
    certainty: includePossible ? "possible" : "certain",
  }));
  const plain = new Set(joins.filter(({ through }) => through.length === 0).map(({ id }) => id));
  return joins.filter(
    ({ through, kind, source, other }) => through.length === 0 || !plain.has(`${kind} ${source} ${other}`),
  );
}

interface Search {
  circuit: Circuit;
  conducts: Uint8Array;
  includePossible: boolean;
  earths: EarthTerminal[];
  earthed: ReadonlySet<number>;
  /** Everything energised that is not mains. */
  low: Instance[];
}

interface Finding {
  kind: Join["kind"];
  other: string;
  through?: string[];
  conductors?: string[];
}

function shortOf({ circuit: { view } }: Search, instance: Instance): Finding[] {
  if (!isReached(instance.hot, instance.supply.ret)) return [];
  const conductors = view.wired
    .filter(({ from }) => both(instance, view.nodeOf(from.element, from.terminal)))
    .map(({ id }) => id);
  return [{ kind: "short", other: instance.supply.element, conductors }];
}

/** Parts that are touched on the plus side of direct voltage, or on a pole of a transformer. */
function liveParts({ circuit: { view } }: Search, { hot }: Instance): Finding[] {
  return view
    .ofKind("accessible-part")
    .filter(({ id }) => isReached(hot, view.nodeOf(id, "surface")))
    .map(({ id }) => ({ kind: "live-part", other: id }));
}

/** Where a pole of mains reaches a part that is touched, earth or another circuit, plainly or through a part. */
function mainsJoins(search: Search, instance: Instance): Finding[] {
  const { circuit, earths, earthed, low } = search;
  const { view } = circuit;
  const neutralEarthed = isNeutralEarthed(circuit, earthed, instance);
  const surfaces = view
    .ofKind("accessible-part")
    .map(({ id }) => ({ element: id, node: view.nodeOf(id, "surface") }));
  const crossed = reachThroughParts(circuit, instance, {
    conducts: search.conducts,
    includePossible: search.includePossible,
    earthed,
    neutralEarthed,
    isEnd: (node) => earthed.has(node) || low.some((other) => holds(other, node)),
  });
  const touches = (node: number) =>
    isReached(instance.hot, node) || (!neutralEarthed && isReached(instance.ret, node));
  const plainEarths = earths.filter(({ node }) => touches(node));
  const studs = plainEarths.filter(({ element }) => view.elements.get(element)?.kind === "earth-terminal");
  const crossedEarths = earths.filter(({ node }) => crossed.has(node) && !earthed.has(node));
  const intoEarth = [...crossed].find(([node]) => earthed.has(node));
  const pole = ({ supply }: Instance) => [supply.hot, supply.ret];

  return [
    ...surfaces.filter(({ node }) => touches(node)).map(({ element }) => plainly("live-part", element)),
    ...(studs.length > 0 ? studs : plainEarths).map(({ element }) => plainly("live-earth", element)),
    ...low
      .filter((other) => pole(other).some(touches))
      .map(({ supply }) => plainly("mains-to-elv", supply.element)),
    ...surfaces.flatMap(({ element, node }) => across("live-part", element, crossed.get(node))),
    ...crossedEarths.flatMap(({ element, node }) => across("live-earth", element, crossed.get(node))),
    ...(intoEarth === undefined ? [] : across("live-earth", earthElement(circuit, earthed), intoEarth[1])),
    ...low.flatMap((other) => {
      const way = [...crossed].find(([node]) => holds(other, node) && !earthed.has(node));
      return across("mains-to-elv", other.supply.element, way?.[1]);
    }),
  ];
}

const plainly = (kind: Join["kind"], other: string): Finding => ({ kind, other });
const across = (kind: Join["kind"], other: string, through: string[] | undefined): Finding[] =>
  through === undefined ? [] : [{ kind, other, through }];

const holds = ({ hot, ret }: Instance, node: number) => isReached(hot, node) || isReached(ret, node);
const both = ({ hot, ret }: Instance, node: number) => isReached(hot, node) && isReached(ret, node);

/** A sentence for a join. */
export function joinText(view: MapView, join: Join): string {
  const when =
    join.switchesOn.length === 0
      ? "With every switch off"
      : `With ${list(join.switchesOn.map((id) => view.name(id)))} on`;
  const may = join.certainty === "possible" ? "may be" : "is";
  const source = view.name(join.source);
  const other = view.name(join.other);
  const through =
    join.through.length === 0 ? "" : ` through ${list(join.through.map((id) => view.name(id)))}`;
  switch (join.kind) {
    case "short":
      return `${when}, ${other} ${may} short-circuited.`;
    case "mains-to-elv":
      return `${when}, mains from ${source} ${may} joined with the extra-low voltage of ${other}${through}.`;
    case "live-part":
      return `${when}, ${other}, which can be touched, ${may} live from ${source}${through}.`;
    case "live-earth":
      return `${when}, a pole of ${source} ${may} joined with the protective earth at ${other}${through}.`;
    case "bridged":
      return `${when}, ${list(join.conductors)} ${join.conductors.length > 1 ? "lead" : "leads"} past ${other}, so that it ${join.certainty === "possible" ? "may open" : "opens"} nothing.`;
  }
}
