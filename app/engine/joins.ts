import type { Certainty, Join } from "./analysis";
import type { Circuit } from "./circuit";
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
  return [...joins.values()];
}

const hasDoubt = ({ links, transfers }: Circuit) =>
  links.some(({ certainty }) => certainty === "possible") ||
  transfers.some(({ certainty }) => certainty === "possible");

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
  const { view } = circuit;
  const condition = { positions, includePossible };
  const conducts = conduction(circuit, condition);
  const instances = circuit.sources.flatMap((source) =>
    energise(circuit, source, condition, conducts).instances.map((instance) => ({
      source: source.element,
      instance,
    })),
  );
  const switchesOn = [...positions].filter(([, position]) => position === "on").map(([id]) => id);
  const certainty: Certainty = includePossible ? "possible" : "certain";
  const joins: Join[] = [];
  const add = (kind: Join["kind"], source: string, other: string, conductors: string[] = []) =>
    joins.push({ id: `${kind} ${source} ${other}`, kind, source, other, switchesOn, conductors, certainty });

  for (const { source, instance } of instances) {
    const { hot, ret, supply } = instance;
    if (isReached(hot, supply.ret))
      add(
        "short",
        source,
        supply.element,
        view.wired
          .filter(({ from }) => both(instance, view.nodeOf(from.element, from.terminal)))
          .map(({ id }) => id),
      );
    for (const part of view.ofKind("accessible-part")) {
      const node = view.nodeOf(part.id, "surface");
      if (isReached(hot, node) || (supply.domain === "mains" && isReached(ret, node)))
        add("live-part", source, part.id);
    }
    for (const earth of view.ofKind("earth-terminal")) {
      const node = view.nodeOf(earth.id, "PE");
      if (supply.domain === "mains" ? isReached(hot, node) || isReached(ret, node) : false)
        add("live-earth", source, earth.id);
    }
    if (supply.domain !== "mains") continue;
    for (const other of instances) {
      if (other.instance.supply.domain === "mains") continue;
      if (holds(instance, other.instance.supply.hot) || holds(instance, other.instance.supply.ret)) {
        add("mains-to-elv", source, other.instance.supply.element);
      }
    }
  }
  return joins;
}

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
  switch (join.kind) {
    case "short":
      return `${when}, ${other} ${may} short-circuited.`;
    case "mains-to-elv":
      return `${when}, mains from ${source} ${may} joined with the extra-low voltage of ${other}.`;
    case "live-part":
      return `${when}, ${other}, which can be touched, ${may} live from ${source}.`;
    case "live-earth":
      return `${when}, a pole of ${source} ${may} joined with the protective earth at ${other}.`;
  }
}
