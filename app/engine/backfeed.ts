import type { BackwardPath, FalseIndication, ReverseResult, Verdict3 } from "./analysis";
import type { Reason } from "./bench-check";
import type { Element } from "./energy-map";
import type { MapView } from "./map-view";
import { list } from "./wording";

export interface Judged {
  verdict: Verdict3;
  reasons: Reason[];
}

/** The pins or contacts of an inlet carry mains or mains-like voltage when driven backwards along this way. */
export function isHazardous(view: MapView, path: BackwardPath): boolean {
  if (view.elements.get(path.to)?.kind !== "mains-inlet") return false;
  // From extra-low voltage only something that makes mains voltage on the way, forwards or backwards, gets to mains pins.
  return path.via.some((id) => {
    const element = view.elements.get(id);
    return (
      element !== undefined &&
      ["converter", "charger", "isolated-supply", "transformer"].includes(element.kind)
    );
  });
}

/**
 * One source against another: a way in the healthy unit fails; one that cannot be excluded is not known; one that a single
 * failed part opens onto mains pins fails too, since no single fault may make them live. A single-fault way onto
 * extra-low-voltage contacts passes and is told.
 */
export function judgePair(view: MapView, reverse: ReverseResult, from: string, to: string): Judged {
  const paths = reverse.paths.filter((path) => path.from === from && path.to === to);
  const reasons: Reason[] = [];
  const verdicts: Verdict3[] = [];
  for (const path of paths) {
    verdicts.push(verdictOf(view, path));
    reasons.push({
      text: pathText(view, path),
      elements: [path.from, ...path.via, path.to],
      conductors: path.conductors,
    });
  }
  if (!paths.some(({ failed }) => failed === null) && reverse.unchecked.length > 0) {
    verdicts.push("unknown");
    reasons.unshift({
      text: uncheckedText(view, reverse.unchecked),
      elements: reverse.unchecked,
      conductors: [],
    });
  } else if (!paths.some(({ failed }) => failed === null)) {
    const guards = reverse.blockingParts.map((id) => view.name(id));
    reasons.unshift({
      text: `In the healthy unit no way leads from ${view.name(from)} back to ${view.name(to)}${guards.length === 0 ? "" : `; each of ${list(guards)} was also taken as failed short, one at a time`}.`,
      elements: [from, to],
      conductors: [],
    });
    verdicts.push("pass");
  }
  return { verdict: worstOf(verdicts), reasons };
}

/** Said wherever nothing was found although not everything was looked at. */
export const uncheckedText = (view: MapView, ids: string[]): string =>
  `Not every position of ${list(ids.map((id) => view.name(id)))} was worked out together, so what happens in the others is not known.`;

export function verdictOf(view: MapView, path: BackwardPath): Verdict3 {
  // A shared neutral drives nothing by itself; with the plug reversed or the neutral interrupted it may.
  if (path.poles === "neutral") return "unknown";
  if (path.certainty === "possible")
    return path.failed === null || isHazardous(view, path) ? "unknown" : "pass";
  if (path.failed === null) return "fail";
  return isHazardous(view, path) ? "fail" : "pass";
}

/** A sentence for a way backwards. */
export function pathText(
  view: MapView,
  { from, to, via, failed, certainty, poles, unknownParts }: BackwardPath,
): string {
  const when = failed === null ? "" : `If ${view.name(failed)} fails short, `;
  if (poles !== "both") return onePoleText(view, { from, to, via, certainty, poles }, when);
  const may = certainty === "possible" ? "may drive" : "drives";
  const way = via.length === 0 ? "directly" : `through ${via.map((id) => view.name(id)).join(", ")}`;
  const doubt =
    unknownParts.length === 0
      ? ""
      : ` It can't be excluded, because it is not known whether ${list(unknownParts.map((id) => view.name(id)))} lets energy pass backwards.`;
  return `${when}${view.name(from)} ${may} energy ${goal(view.elements.get(to), view.name(to))} ${way}.${doubt}`;
}

/** One pole alone: the plug pins must be parted from every pole of what makes mains voltage inside. */
function onePoleText(
  view: MapView,
  { from, to, via, certainty, poles }: Pick<BackwardPath, "from" | "to" | "via" | "certainty" | "poles">,
  when: string,
): string {
  const pole = poles === "live" ? "live pole" : "neutral";
  const word = certainty === "possible" ? "may be" : "is";
  const way = via.length === 0 ? "" : ` through ${via.map((id) => view.name(id)).join(", ")}`;
  const then =
    poles === "live"
      ? "Whoever touches the pins touches it: every pole must be parted."
      : "Whether it can carry a voltage there is not shown; every pole should be parted.";
  const the = when === "" ? "The" : `${when}the`;
  return `${the} ${pole} that ${view.name(from)} feeds ${word} joined with the plug pins of ${view.name(to)}${way}. ${then}`;
}

function goal(element: Element | undefined, name: string): string {
  switch (element?.kind) {
    case "mains-inlet":
      return `onto the plug pins of ${name}`;
    case "dc-inlet":
      return `onto the contacts of ${name}`;
    default:
      return `into ${name} past its charger`;
  }
}

const meaningWords: Record<string, string> = {
  "mains-present": "mains is present",
  "dc-input-present": "the DC input is present",
  "battery-connected": "the battery is connected",
  charging: "the battery is being charged",
};

/** Whether a lamp tells the truth. `null` for one whose meaning no other source can belie. */
export function judgeLamp(view: MapView, reverse: ReverseResult, id: string): Judged | null {
  const lamp = view.ofKind("indicator").find((each) => each.id === id);
  if (lamp === undefined) return null;
  if (lamp.meaning === "unknown") {
    return {
      verdict: "unknown",
      reasons: [
        { text: `What ${view.name(id)} tells when lit is not known.`, elements: [id], conductors: [] },
      ],
    };
  }
  if (meaningWords[lamp.meaning] === undefined) return null;
  const lies = reverse.falseIndications.filter(({ indicator }) => indicator === id);
  const reasons = lies.map((lie): Reason => ({
    text: lampText(view, lie),
    elements: [id, lie.litBy, ...(lie.failed === null ? [] : [lie.failed])],
    conductors: [],
  }));
  if (!lies.some(({ failed }) => failed === null)) {
    reasons.unshift({
      text: `In the healthy unit no other source lights ${view.name(id)}.`,
      elements: [id],
      conductors: [],
    });
  }
  const healthy = lies.filter(({ failed }) => failed === null);
  if (healthy.length === 0 && reverse.unchecked.length > 0)
    return {
      verdict: "unknown",
      reasons: [
        {
          text: uncheckedText(view, reverse.unchecked),
          elements: [id, ...reverse.unchecked],
          conductors: [],
        },
      ],
    };
  return {
    verdict: healthy.some(({ certainty }) => certainty === "certain")
      ? "fail"
      : healthy.length > 0
        ? "unknown"
        : "pass",
    reasons,
  };
}

export function lampText(
  view: MapView,
  { indicator, meaning, litBy, failed, certainty }: FalseIndication,
): string {
  const when = failed === null ? "" : `If ${view.name(failed)} fails short, `;
  const word = certainty === "possible" ? "may be lit" : "is lit";
  return `${when}${view.name(indicator)} ${word} by ${view.name(litBy)} alone, although it says that ${meaningWords[meaning] ?? meaning}.`;
}

const worstOf = (verdicts: Verdict3[]): Verdict3 =>
  verdicts.includes("fail")
    ? "fail"
    : verdicts.includes("unknown") || verdicts.length === 0
      ? "unknown"
      : "pass";
