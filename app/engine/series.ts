import type { Circuit, Supply } from "./circuit";
import { conduction, isReached, settingsOf, walk, type Reach } from "./energise";
import { suppliedVolts } from "./supply-data";
import type { UnitFacts } from "./unit-facts";

/** A supply with those that can lie in series with it, each one's plus on the next one's minus. */
export interface Stack {
  /** Sum of the voltages, V; `null` when one is not known or they form a ring. */
  volts: number | null;
  /** Elements in series, from the lowest, with the supply itself. */
  members: string[];
}

type Stacks = Map<number, Stack>;
const cache = new WeakMap<Circuit, { facts: UnitFacts; stacks: Stacks }>();

/** The longest series that a supply can be part of, in any setting of the switches. Its own voltage when it stands alone. */
export function stackOf(circuit: Circuit, supply: Supply, facts: UnitFacts): Stack {
  const known = cache.get(circuit);
  const stacks = known?.facts === facts ? known.stacks : stacksOf(circuit, facts);
  if (known?.facts !== facts) cache.set(circuit, { facts, stacks });
  return (
    stacks.get(supply.hot) ?? {
      volts: suppliedVolts(circuit.view, supply, facts),
      members: [supply.element],
    }
  );
}

function stacksOf(circuit: Circuit, facts: UnitFacts): Stacks {
  const supplies = seriesCandidates(circuit);
  const stacks: Stacks = new Map();
  if (supplies.length < 2) return stacks;
  for (const positions of settingsOf(circuit, () => null).positions) {
    const conducts = conduction(circuit, { positions, includePossible: true });
    const above = supplies.map((supply) =>
      seriesAbove(
        circuit,
        supplies,
        supply,
        walk(circuit, conducts, supply.hot, supply.domain === "dc" ? "with" : "either"),
      ),
    );
    const below = supplies.map((_, index) =>
      above.flatMap((each, other) => (each.includes(index) ? [other] : [])),
    );
    supplies.forEach((supply, index) => {
      const up = longest(circuit, supplies, above, index, facts, new Set(), new Map());
      const down = longest(circuit, supplies, below, index, facts, new Set(), new Map());
      const own = suppliedVolts(circuit.view, supply, facts);
      const volts =
        up.volts === null || down.volts === null || own === null ? null : up.volts + down.volts - own;
      const known = stacks.get(supply.hot);
      if (known === undefined || (known.volts !== null && (volts === null || volts > known.volts)))
        stacks.set(supply.hot, { volts, members: [...down.members.slice(1).reverse(), ...up.members] });
    });
  }
  return stacks;
}

/** Sources and outputs of stages that are not mains. */
const seriesCandidates = ({ sources, transfers }: Circuit): Supply[] =>
  [...sources, ...transfers.filter(({ mode }) => mode === "forward").map(({ to }) => to)].filter(
    ({ domain }) => domain !== "mains",
  );

/**
 * Which supplies stand with their return pole on what a hot pole reaches. A rectifier that alternating voltage feeds shares a
 * pole with it and adds nothing.
 */
function seriesAbove({ transfers }: Circuit, supplies: Supply[], from: Supply, reach: Reach): number[] {
  const isFed = ({ element }: Supply) =>
    from.domain === "ac" &&
    transfers.some((each) => each.element === element && isReached(reach, each.from.ret));
  return supplies.flatMap((supply, index) => (isReached(reach, supply.ret) && !isFed(supply) ? [index] : []));
}

function longest(
  circuit: Circuit,
  supplies: Supply[],
  next: number[][],
  index: number,
  facts: UnitFacts,
  open: Set<number>,
  done: Map<number, Stack>,
): Stack {
  const known = done.get(index);
  if (known !== undefined) return known;
  const supply = supplies[index];
  if (supply === undefined || open.has(index)) return { volts: null, members: [] };
  open.add(index);
  const own = suppliedVolts(circuit.view, supply, facts);
  let best: Stack = { volts: 0, members: [] };
  for (const each of next[index] ?? []) {
    if (each === index) continue;
    const found = longest(circuit, supplies, next, each, facts, open, done);
    if (best.volts !== null && (found.volts === null || found.volts > best.volts)) best = found;
  }
  open.delete(index);
  const stack: Stack = {
    volts: best.volts === null || own === null ? null : best.volts + own,
    members: [supply.element, ...best.members],
  };
  done.set(index, stack);
  return stack;
}
