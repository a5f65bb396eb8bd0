import type { ConsumerIsolation, FusingResult, IsolationResult, Verdict3 } from "./analysis";
import type { ElementOf } from "./energy-map";
import { figure } from "./figure";
import {
  isHand,
  judged,
  mixedBody,
  names,
  poleWord,
  worst,
  type JudgedReason,
  type MainsIsolation,
  type Matter,
} from "./isolation-parts";
import type { MapView } from "./map-view";
import { judgeRest } from "./partial-isolation";
import type { RuleSet } from "./rule-set";
import { list } from "./wording";

/** Judges one mains inlet by what the isolation analysis found. `null` when nothing on the map uses its energy. */
export function judgeMainsIsolation(
  view: MapView,
  isolation: IsolationResult,
  fusing: FusingResult,
  ruleSet: RuleSet,
  inlet: ElementOf<"mains-inlet">,
): MainsIsolation | null {
  const consumers = isolation.sources.find(({ source }) => source === inlet.id)?.consumers ?? [];
  if (consumers.length === 0) return null;
  const matter: Matter = { view, isolation, fusing, ruleSet, inlet, consumers };
  const candidates = consumers.map((each) => ({ each, switches: allPoleSwitches(matter, each) }));
  const without = candidates.filter(({ switches }) => switches.length === 0).map(({ each }) => each);
  const parted = judgeParted(
    matter,
    candidates.filter(({ switches }) => switches.length > 0),
  );
  if (without.length === 0 && parted !== null) return parted;
  const rest = judgeRest(matter, without);
  if (parted === null) return rest;
  const reasons = [...rest.reasons, ...parted.reasons];
  return rest.by === "plug" && parted.verdict !== "fail"
    ? { by: "plug", verdict: "unknown", reasons }
    : { by: "nothing", verdict: "fail", reasons };
}

/**
 * Hand switches that part both poles from one consumer. Where only one pole comes to it, by a common pole of a supply without
 * insulation or by earth, the switch must break both poles elsewhere.
 */
function allPoleSwitches(matter: Matter, { poles }: ConsumerIsolation): string[] {
  const used = poles.filter(({ inUse }) => inUse);
  const breaking = (used[0]?.brokenBy ?? []).filter((id) =>
    used.every(({ brokenBy }) => brokenBy.includes(id)),
  );
  const breaksBoth = (id: string) =>
    matter.consumers.some((each) =>
      each.poles.every(({ inUse, brokenBy }) => inUse && brokenBy.includes(id)),
    );
  return breaking.filter((id) => isHand(matter, id) && (used.length === poles.length || breaksBoth(id)));
}

/** What one switch for all, or else the best switch of each consumer, comes to. */
function judgeParted(
  matter: Matter,
  parted: { each: ConsumerIsolation; switches: string[] }[],
): MainsIsolation | null {
  if (parted.length === 0) return null;
  const bySwitch = new Map(
    [...new Set(parted.flatMap(({ switches }) => switches))].map((id) => [id, judgeSwitch(matter, id)]),
  );
  const best = (ids: string[]): string[] =>
    [...ids].sort((a, b) => rank(bySwitch.get(a)?.verdict) - rank(bySwitch.get(b)?.verdict)).slice(0, 1);
  const common = best(
    [...bySwitch.keys()].filter((id) => parted.every(({ switches }) => switches.includes(id))),
  );
  const needed = common.length > 0 ? common : parted.flatMap(({ switches }) => best(switches));
  const chosen = [...new Set(needed)];
  const reasons = chosen.flatMap((id) => bySwitch.get(id)?.reasons ?? []);
  const verdicts = chosen.map((id) => bySwitch.get(id)?.verdict ?? "unknown");
  if (common.length === 0)
    reasons.push(
      judged(
        "pass",
        `Each of ${names(matter.view, chosen)} parts its own loads only: all must be off for the unit to be off.`,
        chosen,
      ),
    );
  if (!matter.isolation.joinsComplete) {
    verdicts.push("unknown");
    reasons.push(
      judged("unknown", "There are more changeover switches than all positions can be worked out for.", [
        matter.inlet.id,
      ]),
    );
  }
  return { by: "switch", switches: chosen, verdict: worst(verdicts), reasons };
}

const rank = (verdict: Verdict3 | undefined) => ["pass", "unknown", "fail"].indexOf(verdict ?? "fail");

function judgeSwitch(
  { view, isolation, fusing, ruleSet, inlet, consumers }: Matter,
  id: string,
): { verdict: Verdict3; reasons: JudgedReason[] } {
  const element = view.ofKind("switch").find((each) => each.id === id);
  const name = view.name(id);
  const gap = ruleSet.values.contactGap;
  const reasons: JudgedReason[] = [
    judged("pass", `${name} breaks line and neutral of ${view.name(inlet.id)} together, in one body.`, [
      id,
      inlet.id,
    ]),
  ];
  const verdicts: Verdict3[] = ["pass"];
  const add = (verdict: Verdict3, text: string, elements = [id]) => {
    verdicts.push(verdict);
    reasons.push(judged(verdict, text, elements));
  };
  if (element?.gapMm === null || element === undefined) {
    add(
      "unknown",
      `The contact gap of ${name} is not known; ${figure(gap.value)} mm at each pole is needed.`,
    );
  } else if (element.gapMm < gap.value) {
    add(
      "fail",
      `${name} opens only ${figure(element.gapMm)} mm at each pole; ${figure(gap.value)} mm is needed.`,
    );
  } else
    add("pass", `${name} opens ${figure(element.gapMm)} mm at each pole; ${figure(gap.value)} mm is needed.`);
  for (const contact of fusing.contacts.filter((each) => each.switch === id))
    add(contact.verdict, contact.text, [id, contact.source]);
  const mixed = mixedBody(view, isolation, id);
  if (mixed !== null) add(mixed.verdict, mixed.text);
  const past = consumers.flatMap(({ consumer, poles }) =>
    poles.flatMap((each) =>
      each.past
        .filter((way) => way.switch === id)
        .map(({ through }) => ({ consumer, pole: each.pole, through })),
    ),
  );
  for (const { consumer, pole, through } of past)
    add(
      element?.promise === "isolation" ? "fail" : "unknown",
      `With ${name} off, the ${poleWord(pole)} of ${view.name(inlet.id)} still comes to ${view.name(consumer)} through ${list(through.map((each) => view.name(each)))}.`,
      [id, consumer, ...through],
    );
  return { verdict: worst(verdicts), reasons };
}
