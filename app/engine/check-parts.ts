import type { Statement, Verdict3 } from "./analysis";
import type { BenchCheck, ComputedAnswer, Reason } from "./bench-check";
import type { MapView } from "./map-view";
import type { Citation } from "./rule-set";
import { list, sentence } from "./wording";

/** Pieces that many checks are put together from. */

/** Key of a check: its id and what it is about, so that it is the same in the next revision. */
export const keyOf = (id: string, ...subjects: string[]): string => [id, ...subjects].join(":");

export const because = (text: string, elements: string[] = [], conductors: string[] = []): Reason => ({
  text,
  elements,
  conductors,
});

export const answer = (verdict: Verdict3, reasons: Reason[]): ComputedAnswer => ({ verdict, reasons });

/** Worst of several verdicts; of none it is unknown: absence never passes. */
export function worstVerdict(verdicts: Verdict3[]): Verdict3 {
  if (verdicts.includes("fail")) return "fail";
  return verdicts.length === 0 || verdicts.includes("unknown") ? "unknown" : "pass";
}

export const examination = (question: string, conforms: string, doesNot: string): BenchCheck["asks"] => ({
  kind: "examination",
  question,
  conforms,
  doesNot,
});

export const reasonsOf = (statements: Statement[]): Reason[] =>
  statements.map(({ text, elements, conductors }) => because(text, elements, conductors));

export const practice = (clause: string, note?: string): Citation => ({
  standard: "workshop practice",
  clause,
  edition: "none",
  mark: "M",
  ...(note === undefined ? {} : { note }),
});

export const caution = {
  unplug: "Pull the plug and keep it in sight before you touch anything inside.",
  charge: "Capacitors can hold a dangerous voltage after unplugging. Measure before you touch.",
  battery:
    "A battery can't be switched off: it drives hundreds of amperes into a slipped tool. Take off rings, cover one pole.",
  testVoltage:
    "The test voltage is felt and can be dangerous. Touch nothing during the test and discharge the unit afterwards.",
  stillLive:
    "The plug is pulled, but the unit is still live from its battery or another source: touch nothing inside, and no pin or contact.",
  shrouded:
    "Never measure on bare pins: put the plug into a shrouded test socket that is joined to nothing, and measure there.",
  inverterLive:
    "The inverter makes mains voltage from the battery in this step, with no plug to pull: with one hand, nobody else touching the unit, covers on unless the step says otherwise.",
  live: "This step is done with mains on: behind a residual-current device, with one hand, nobody else touching the unit, covers on unless the step says otherwise.",
  licence: "Where the law says that only licensed people work on mains, they do this step.",
  earthLoop:
    "Make sure that the unit touches no other earthed metal, which would carry test current beside the conductor under test.",
} as const;

/** What to do before anything inside is touched. A pulled plug makes only a unit dead that has no source of its own. */
export function beforeTouching(view: MapView): string[] {
  const inlets = [...view.ofKind("mains-inlet"), ...view.ofKind("dc-inlet")];
  const batteries = view.ofKind("battery").map(({ id }) => view.name(id));
  const inverters = view.ofKind("converter").filter(({ output }) => output === "mains");
  if (batteries.length === 0) return [caution.unplug];
  return [
    ...(inlets.length > 0 ? [caution.unplug] : []),
    ...(inverters.length > 0
      ? [
          `Stop ${list(inverters.map(({ id }) => view.name(id)))}: from the battery it makes a voltage that kills, plug or no plug.`,
        ]
      : []),
    `${inlets.length > 0 ? "Pulling the plug does not make this unit dead" : "No plug makes this unit dead"}: ${list(batteries)} keeps it live. Take out its fuse or take off its lead, cover the pole, and measure that all is dead.`,
    caution.battery,
  ];
}

/** For a step done while the unit works: on mains, or on what it makes or holds itself. */
export function whileWorking(view: MapView): string[] {
  const makesMains = view.ofKind("converter").some(({ output }) => output === "mains");
  return [
    ...(view.ofKind("mains-inlet").length > 0 ? [caution.live] : []),
    ...(view.ofKind("mains-inlet").length === 0 && makesMains ? [caution.inverterLive] : []),
    ...(view.ofKind("battery").length > 0 ? [caution.battery] : []),
  ];
}

/** Whether the unit carries mains voltage while it works: from its inlet, or made by an inverter. */
export const worksOnMains = (view: MapView): boolean =>
  view.ofKind("mains-inlet").length > 0 || view.ofKind("converter").some(({ output }) => output === "mains");

/** The first step of a test with everything dead: what must be off or out before an instrument is connected. */
export function makeDead(view: MapView): string {
  const inlets = [...view.ofKind("mains-inlet"), ...view.ofKind("dc-inlet")];
  const batteries = view.ofKind("battery").map(({ id }) => view.name(id));
  const inverters = view.ofKind("converter").filter(({ output }) => output === "mains");
  const steps = [
    ...(inverters.length > 0 ? [`stop ${list(inverters.map(({ id }) => view.name(id)))}`] : []),
    ...(inlets.length > 0 ? [`pull the plug of ${list(inlets.map(({ id }) => view.name(id)))}`] : []),
    ...(batteries.length > 0 ? [`take both leads off ${list(batteries)} and cover them`] : []),
    "measure that nothing is live any more",
  ];
  return `${sentence(steps.join("; "))}.`;
}
