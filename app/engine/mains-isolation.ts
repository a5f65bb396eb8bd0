import type { FusingResult, IsolationResult, Verdict3 } from "./analysis";
import type { Reason } from "./bench-check";
import type { ElementOf } from "./energy-map";
import { figure } from "./figure";
import type { MapView } from "./map-view";
import type { RuleSet } from "./rule-set";
import { list } from "./wording";

/**
 * How a mains inlet is parted from the unit: by a switch that breaks all poles together, by the plug alone (no switch, or one
 * that promises function only in the line of a polarised plug), or not as it should be.
 */
export type MainsIsolation =
  | { by: "switch"; switch: string; verdict: Verdict3; reasons: Reason[] }
  | { by: "plug"; verdict: "unknown"; reasons: Reason[] }
  | { by: "nothing"; verdict: Verdict3; reasons: Reason[] };

const reason = (text: string, elements: string[], conductors: string[] = []): Reason => ({
  text,
  elements,
  conductors,
});

/** Judges one mains inlet by what the isolation analysis found. `null` when nothing on the map uses its energy. */
export function judgeMainsIsolation(
  view: MapView,
  isolation: IsolationResult,
  fusing: FusingResult,
  ruleSet: RuleSet,
  inlet: ElementOf<"mains-inlet">,
): MainsIsolation | null {
  const report = isolation.sources.find(({ source }) => source === inlet.id);
  if (report === undefined) return null;
  const hand = new Set(
    view.ofKind("switch").flatMap(({ id, actuator }) => (actuator === "hand" ? [id] : [])),
  );
  const candidates = report.allPoleSwitches.filter((id) => hand.has(id));
  const judged = candidates.map((id) => judgeSwitch(view, isolation, fusing, ruleSet, inlet, id));
  const best =
    judged.find(({ verdict }) => verdict === "pass") ??
    judged.find(({ verdict }) => verdict === "unknown") ??
    judged[0];
  if (best !== undefined) return best;

  const breaking = [...new Set(report.poles.flatMap(({ brokenBy }) => brokenBy))].filter((id) =>
    hand.has(id),
  );
  if (breaking.length === 0) {
    return report.poles.some(({ partedWhenAllOff }) => partedWhenAllOff !== true)
      ? {
          by: "plug",
          verdict: "unknown",
          reasons: [
            reason(
              `No hand switch parts the mains of ${view.name(inlet.id)}: only pulling the plug isolates the unit, so the plug must be in easy reach.`,
              [inlet.id],
            ),
          ],
        }
      : null;
  }
  return partlyBroken(view, isolation, inlet, breaking);
}

function judgeSwitch(
  view: MapView,
  isolation: IsolationResult,
  fusing: FusingResult,
  ruleSet: RuleSet,
  inlet: ElementOf<"mains-inlet">,
  id: string,
): MainsIsolation {
  const element = view.ofKind("switch").find((each) => each.id === id);
  const name = view.name(id);
  const gap = ruleSet.values.contactGap;
  const reasons: Reason[] = [
    reason(`${name} breaks line and neutral of ${view.name(inlet.id)} together, in one body.`, [
      id,
      inlet.id,
    ]),
  ];
  const verdicts: Verdict3[] = ["pass"];
  const add = (verdict: Verdict3, text: string, elements = [id]) => {
    verdicts.push(verdict);
    reasons.push(reason(text, elements));
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
  return { by: "switch", switch: id, verdict: worst(verdicts), reasons };
}

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

function partlyBroken(
  view: MapView,
  isolation: IsolationResult,
  inlet: ElementOf<"mains-inlet">,
  breaking: string[],
): MainsIsolation {
  const report = isolation.sources.find(({ source }) => source === inlet.id);
  const hand = new Set(breaking);
  const broken = (report?.poles ?? []).filter(({ brokenBy }) => brokenBy.some((id) => hand.has(id)));
  const left = (report?.poles ?? []).filter(({ brokenBy }) => !brokenBy.some((id) => hand.has(id)));
  const names = list(breaking.map((id) => view.name(id)));
  if (left.length === 0) {
    return {
      by: "nothing",
      verdict: "fail",
      reasons: [
        reason(
          `Line and neutral of ${view.name(inlet.id)} are broken by different switches (${names}), not together.`,
          [...breaking, inlet.id],
        ),
      ],
    };
  }
  const leftNames = list(left.map(({ pole }) => poleWord(pole)));
  const still = stillLive(isolation, inlet.id);
  const functional = breaking.every(
    (id) => view.ofKind("switch").find((each) => each.id === id)?.promise === "function",
  );
  if (functional && inlet.polarised === "yes" && broken.every(({ pole }) => pole === "L")) {
    return {
      by: "plug",
      verdict: "unknown",
      reasons: [
        reason(
          `${names} breaks the line only and promises function only; only pulling the plug isolates the unit. It must not be marked as isolating.`,
          [...breaking, inlet.id],
        ),
      ],
    };
  }
  const reversal =
    inlet.polarised === "yes"
      ? ""
      : inlet.polarised === "no"
        ? " The plug fits both ways round, so this may be the line."
        : " Whether the plug fits both ways round is not known; this may be the line.";
  const reasons = [
    reason(
      `${names} breaks only the ${list(broken.map(({ pole }) => poleWord(pole)))} of ${view.name(inlet.id)}. The ${leftNames} stays joined: this is not double-pole isolation.${reversal}`,
      [...breaking, inlet.id],
      still,
    ),
    ...(still.length === 0
      ? []
      : [
          reason(
            `With every switch off, ${list(still)} stay live from ${view.name(inlet.id)}.`,
            [inlet.id],
            still,
          ),
        ]),
    ...breaking.flatMap((id) => {
      const mixed = mixedBody(view, isolation, id);
      return mixed === null ? [] : [reason(mixed.text, [id])];
    }),
  ];
  return { by: "nothing", verdict: "fail", reasons };
}

const poleWord = (pole: string) =>
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
