import type { ConsumerIsolation, FusingResult, IsolationResult, Verdict3 } from "./analysis";
import type { Reason } from "./bench-check";
import type { ElementOf } from "./energy-map";
import type { MapView } from "./map-view";
import type { RuleSet } from "./rule-set";
import { list } from "./wording";

/** Pieces that the judgement of a mains inlet's isolation is put together from. */

/**
 * How a mains inlet is parted from the unit: by switches that break all poles of what they part together, by the plug alone
 * (no switch, or one in a single pole that promises function only), or not as it should be.
 */
export type MainsIsolation =
  | { by: "switch"; switches: string[]; verdict: Verdict3; reasons: JudgedReason[] }
  | { by: "plug"; verdict: "unknown"; reasons: JudgedReason[] }
  | { by: "nothing"; verdict: Verdict3; reasons: JudgedReason[] };

/** One point of the judgement, with what it comes to by itself. */
export interface JudgedReason {
  verdict: Verdict3;
  reason: Reason;
}

export interface Matter {
  view: MapView;
  isolation: IsolationResult;
  fusing: FusingResult;
  ruleSet: RuleSet;
  inlet: ElementOf<"mains-inlet">;
  consumers: ConsumerIsolation[];
}

export const judged = (
  verdict: Verdict3,
  text: string,
  elements: string[],
  conductors: string[] = [],
): JudgedReason => ({ verdict, reason: { text, elements, conductors } });

export const isHand = ({ view }: Matter, id: string) =>
  view.ofKind("switch").some((each) => each.id === id && each.actuator === "hand");

export const names = (view: MapView, ids: string[]) => list(ids.map((id) => view.name(id)));
export const promiseOf = (view: MapView, id: string) =>
  view.ofKind("switch").find((each) => each.id === id)?.promise;

/** Mains and extra-low voltage in one switch body: allowed only with insulation between poles that its maker calls reinforced. */
export function mixedBody(
  view: MapView,
  isolation: IsolationResult,
  id: string,
): { verdict: Verdict3; text: string } | null {
  const report = isolation.switches.find(({ element }) => element === id);
  if (report === undefined || !report.mixesMainsAndElv) return null;
  const element = view.ofKind("switch").find((each) => each.id === id);
  const poles = report.poles
    .map(({ pole, circuits }) => `pole ${pole} ${circuits.map(circuitWord).join(" and ")}`)
    .join(", ");
  const text = `${view.name(id)} has mains and extra-low voltage in one body (${poles})`;
  switch (element?.reinforcedBetweenPoles) {
    case "yes":
      return { verdict: "pass", text: `${text}; its maker states reinforced insulation between the poles.` };
    case "no":
      return { verdict: "fail", text: `${text}: one failure inside it joins them. Use two switches.` };
    default:
      return {
        verdict: "unknown",
        text: `${text}; whether its maker states reinforced insulation between the poles is not known.`,
      };
  }
}

const circuitWord = (circuit: "mains" | "elv" | "earth") =>
  circuit === "elv" ? "extra-low voltage" : circuit === "earth" ? "protective earth" : "mains";

export const poleWord = (pole: string) =>
  pole === "L" ? "line" : pole === "N" ? "neutral" : pole === "+" ? "plus" : "minus";

/** Conductors on which a source is still found with every switch off. */
export function stillLive({ whenOff }: IsolationResult, source: string): string[] {
  return whenOff
    .filter(({ from }) => from.some((each) => each.source === source))
    .map(({ conductor }) => conductor);
}

const order: Verdict3[] = ["fail", "unknown", "pass"];
export const worst = (verdicts: Verdict3[]): Verdict3 =>
  order.find((each) => verdicts.includes(each)) ?? "unknown";
