import { drawOf } from "./carried-load";
import type { Circuit } from "./circuit";
import { isReached } from "./energise";
import type { ElementOf } from "./energy-map";
import type { Feed } from "./feeds";
import { figure } from "./figure";
import type { Rated } from "./part-ratings";
import type { Citation } from "./rule-set";
import { stackOf } from "./series";
import type { UnitFacts } from "./unit-facts";

/** Largest trip voltage while charging and smallest while discharging that boards for a chemistry are made with, V per cell. */
export const boardTrips: Partial<
  Record<ElementOf<"battery">["chemistry"], { over: number; under: number; citation: Citation }>
> = {
  lifepo4: {
    over: 3.93,
    under: 2.0,
    citation: {
      standard: "maker's data",
      clause: "protection board, LFP",
      edition: "public page",
      mark: "V",
    },
  },
  "li-ion": {
    over: 4.355,
    under: 2.5,
    citation: {
      standard: "maker's data",
      clause: "protection board, Li-ion",
      edition: "public page",
      mark: "V",
    },
  },
};

/** What a pack is asked for against what its maker allows. */
export function judgePack(
  circuit: Circuit,
  feeds: Feed[],
  battery: ElementOf<"battery">,
  facts: UnitFacts,
): Rated[] {
  const found: Rated[] = [];
  const own = feeds.filter(
    ({ instance }) => instance.parent === null && instance.supply.element === battery.id,
  );
  const loads = own.map((feed) => drawnFrom(circuit, feed, facts));
  const amps = Math.max(0, ...loads.map((each) => each.amps));
  const isInSeries = own.some(({ instance }) => stackOf(circuit, instance.supply, facts).members.length > 1);
  const complete = !isInSeries && loads.every((each) => each.complete);
  const allowed = battery.maxDischargeAmps;
  if (allowed === null) {
    if (amps > 0 || !complete)
      found.push({
        verdict: "unknown",
        text: `gives ${figure(amps)} A, and the largest discharge current that its maker allows is not known`,
      });
  } else if (amps > allowed)
    found.push({
      verdict: "fail",
      text: `may be discharged with ${figure(allowed)} A, but its loads draw ${complete ? "" : "at least "}${figure(amps)} A`,
    });
  else if (!complete)
    found.push({
      verdict: "unknown",
      text: `may be discharged with ${figure(allowed)} A, and not everything that it feeds is known`,
    });
  return found;
}

/** All that stands between the poles of a source itself, A. Other sources are not charged from it. */
function drawnFrom(circuit: Circuit, feed: Feed, facts: UnitFacts): { amps: number; complete: boolean } {
  const { hot, ret, supply } = feed.instance;
  let amps = 0;
  let complete = true;
  const counted = new Set<string>();
  for (const { kind, element: id, a, b } of circuit.links) {
    if (kind !== "consumer" || id === null || id === supply.element || counted.has(id)) continue;
    const element = circuit.view.elements.get(id);
    if (element === undefined || element.kind === "battery") continue;
    const isFed = (isReached(hot, a) && isReached(ret, b)) || (isReached(hot, b) && isReached(ret, a));
    if (!isFed) continue;
    counted.add(id);
    const draw = drawOf(element, facts, feed.limitAmps);
    if (draw === null || !Number.isFinite(draw)) complete = false;
    else amps += draw;
  }
  return { amps, complete };
}

/** Trip voltages of a protection board against the cells that it is wired to. */
export function judgeBoard({ view }: Circuit, board: ElementOf<"bms">): Rated[] {
  const packs = view
    .ofKind("battery")
    .filter(({ id }) =>
      view.wired.some(
        ({ from, to }) =>
          (from.element === id && to.element === board.id) ||
          (to.element === id && from.element === board.id),
      ),
    );
  return packs.flatMap(({ id, chemistry }): Rated[] => {
    if (chemistry === "unknown")
      return [
        {
          verdict: "unknown",
          text: `protects ${view.name(id)}, and whether it suits its chemistry is not known`,
        },
      ];
    const trips = boardTrips[chemistry];
    if (trips === undefined) return [];
    const found: Rated[] = [];
    if (board.overVoltsPerCell === null)
      found.push({ verdict: "unknown", text: "stops charging at a voltage that is not known" });
    else if (board.overVoltsPerCell > trips.over)
      found.push({
        verdict: "fail",
        text: `stops charging at ${figure(board.overVoltsPerCell)} V per cell only; boards for the cells of ${view.name(id)} stop at ${figure(trips.over)} V at most`,
      });
    if (board.underVoltsPerCell !== null && board.underVoltsPerCell < trips.under)
      found.push({
        verdict: "fail",
        text: `lets the cells of ${view.name(id)} down to ${figure(board.underVoltsPerCell)} V; boards for them stop at ${figure(trips.under)} V at least`,
      });
    return found;
  });
}
