import type {
  IsolationResult,
  PoleReport,
  SourceIsolation,
  SwitchCombination,
  SwitchReport,
} from "./analysis";
import type { Circuit, Supply } from "./circuit";
import { consumerIsolation, usingLinks } from "./consumer-isolation";
import { findJoins } from "./joins";
import {
  conduction,
  configurations,
  energise,
  isReached,
  uncheckedChangeovers,
  walk,
  type Position,
} from "./energise";
import { liveConductors, liveSets } from "./live";

/** Up to this many switches every combination is worked out; any one can be asked for with `liveInStates`. */
const completeUpTo = 6;

/** What each source still reaches as switches are moved, which switches part its poles, and which circuits share a switch. */
export function analyseIsolation(circuit: Circuit): IsolationResult {
  const { combinations, complete } = goThroughCombinations(circuit);
  return {
    sources: circuit.sources.map((source) => isolationOf(circuit, source)),
    switches: circuit.switches.map(({ id }) => switchReport(circuit, id)),
    whenOff: liveConductors(circuit, allAt(circuit, "off")),
    combinations,
    combinationsComplete: complete,
    joins: findJoins(circuit),
    joinsComplete: uncheckedChangeovers(circuit).length === 0,
  };
}

/** Every switch in the same position. */
export function allAt(circuit: Circuit, position: Position): Map<string, Position> {
  return new Map(circuit.switches.map(({ id }) => [id, position]));
}

function isolationOf(circuit: Circuit, source: Supply): SourceIsolation {
  const poles = [poleReport(circuit, source, "hot"), poleReport(circuit, source, "ret")];
  // Mains has two poles that may be live, whether the map uses both or not.
  const used = poles.some(({ inUse }) => inUse)
    ? poles.filter(({ inUse }) => inUse || source.domain === "mains")
    : [];
  return {
    source: source.element,
    poles: poles.map(({ report }) => report),
    consumers: source.domain === "mains" ? consumerIsolation(circuit, source) : [],
    allPoleSwitches:
      used.length === 0
        ? []
        : circuit.switches
            .map(({ id }) => id)
            .filter((id) => used.every(({ report }) => report.brokenBy.includes(id))),
  };
}

function poleReport(
  circuit: Circuit,
  source: Supply,
  pole: "hot" | "ret",
): { report: PoleReport; inUse: boolean } {
  const using = usingLinks(circuit).flatMap(({ a, b }) => [a, b]);
  const reaches = (positions: ReadonlyMap<string, Position>, includePossible: boolean) => {
    const sense = source.domain === "dc" ? (pole === "hot" ? "with" : "against") : "either";
    const reach = walk(circuit, conduction(circuit, { positions, includePossible }), source[pole], sense);
    return using.some((node) => isReached(reach, node));
  };
  const inUse = configurations(circuit, () => null).some((positions) => reaches(positions, true));
  const brokenBy = inUse
    ? circuit.switches
        .map(({ id }) => id)
        .filter(
          (off) =>
            !configurations(circuit, (id) => (id === off ? "off" : null)).some((each) => reaches(each, true)),
        )
    : [];
  const off = allAt(circuit, "off");
  return {
    inUse,
    report: {
      pole: source.domain === "mains" ? (pole === "hot" ? "L" : "N") : pole === "hot" ? "+" : "-",
      brokenBy,
      partedWhenAllOff: reaches(off, false) ? false : reaches(off, true) ? null : true,
    },
  };
}

function switchReport(circuit: Circuit, id: string): SwitchReport {
  const byPole = new Map<number, Set<"mains" | "elv" | "earth">>();
  for (const { from, to, circuit: belongs } of circuit.view.wired) {
    for (const { element, terminal } of [from, to]) {
      if (element !== id) continue;
      const pole = Number.parseInt(terminal, 10);
      byPole.set(pole, (byPole.get(pole) ?? new Set()).add(belongs));
    }
  }
  const circuits = new Set([...byPole.values()].flatMap((each) => [...each]));
  return {
    element: id,
    poles: [...byPole]
      .sort(([a], [b]) => a - b)
      .map(([pole, each]) => ({ pole, circuits: [...each].sort() })),
    mixesMainsAndElv: circuits.has("mains") && circuits.has("elv"),
    switchesEarth: circuits.has("earth"),
  };
}

function goThroughCombinations(circuit: Circuit) {
  const ids = circuit.switches.map(({ id }) => id);
  const complete = ids.length <= completeUpTo;
  const chosen = complete ? everyCombination(ids) : fewCombinations(ids);
  const seen = new Map<string, SwitchCombination>();
  for (const on of chosen) {
    const positions = new Map<string, Position>(ids.map((id) => [id, on.has(id) ? "on" : "off"]));
    const wide = { positions, includePossible: true };
    const wideConducts = conduction(circuit, wide);
    const energised = circuit.sources.map((source) => energise(circuit, source, wide, wideConducts));
    const live = liveSets(circuit, energised);
    const states = Object.fromEntries(ids.map((id) => [id, on.has(id) ? ("on" as const) : ("off" as const)]));
    const key = Object.values(live)
      .map((ids) => ids.join(","))
      .join(";");
    const same = seen.get(key);
    if (same === undefined) seen.set(key, { states, live, alike: 1 });
    else same.alike += 1;
  }
  return { combinations: [...seen.values()], complete };
}

/** All subsets, those with fewest switches on first, so that what is found is told in its simplest form. */
function everyCombination(ids: string[]): Set<string>[] {
  return Array.from(
    { length: 2 ** ids.length },
    (_, bits) => new Set(ids.filter((_id, index) => (bits >> index) & 1)),
  ).sort((a, b) => a.size - b.size);
}

function fewCombinations(ids: string[]): Set<string>[] {
  return [
    new Set<string>(),
    ...ids.map((id) => new Set([id])),
    ...ids.map((off) => new Set(ids.filter((id) => id !== off))),
    new Set(ids),
  ];
}
