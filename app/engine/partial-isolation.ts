import type { ConsumerIsolation, ConsumerPole } from "./analysis";
import type { ElementOf } from "./energy-map";
import {
  isHand,
  judged,
  mixedBody,
  names,
  poleWord,
  promiseOf,
  stillLive,
  type MainsIsolation,
  type Matter,
} from "./isolation-parts";
import { list } from "./wording";

/** What no one hand switch parts with both poles: by the plug alone, or by switches that do less than they should. */
export function judgeRest(matter: Matter, consumers: ConsumerIsolation[]): MainsIsolation {
  const { view, inlet } = matter;
  const poles = consumers.flatMap((each) => each.poles);
  const breaking = switchesOf(poles).filter((id) => isHand(matter, id));
  if (breaking.length > 0) return partlyBroken(matter, consumers, breaking);
  const side = sideBySide(matter, poles);
  if (side.length > 0) return onlyTogether(matter, side);
  const claiming = switchesOf(poles).filter((id) => promiseOf(view, id) === "isolation");
  if (claiming.length > 0)
    return {
      by: "nothing",
      verdict: "fail",
      reasons: [
        judged(
          "fail",
          `Only ${names(view, claiming)} parts the mains of ${view.name(inlet.id)}, no hand switch: a contact that a coil moves promises no isolation.`,
          [...claiming, inlet.id],
        ),
      ],
    };
  const some = consumers.length < matter.consumers.length;
  const what = some
    ? `${names(
        view,
        consumers.map(({ consumer }) => consumer),
      )} from the mains`
    : "the mains";
  return {
    by: "plug",
    verdict: "unknown",
    reasons: [
      judged(
        "unknown",
        `No hand switch parts ${what} of ${view.name(inlet.id)}: only pulling the plug isolates the unit, so the plug must be in easy reach.`,
        [inlet.id, ...(some ? consumers.map(({ consumer }) => consumer) : [])],
      ),
    ],
  };
}

const switchesOf = (poles: ConsumerPole[]) => [...new Set(poles.flatMap(({ brokenBy }) => brokenBy))];

/** Hand switches in mains of which no single one, but all together, part a pole: they lie side by side. */
function sideBySide(matter: Matter, poles: ConsumerPole[]): string[] {
  if (!poles.some(({ partedByHand }) => partedByHand)) return [];
  return matter.isolation.switches
    .filter(({ poles: own }) => own.some(({ circuits }) => circuits.includes("mains")))
    .map(({ element }) => element)
    .filter((id) => isHand(matter, id));
}

function onlyTogether({ view, inlet }: Matter, switches: string[]): MainsIsolation {
  const text = `${names(view, switches)} lie side by side: no single one parts a pole of ${view.name(inlet.id)}`;
  const elements = [...switches, inlet.id];
  return switches.every((id) => promiseOf(view, id) === "function")
    ? {
        by: "plug",
        verdict: "unknown",
        reasons: [
          judged(
            "unknown",
            `${text}, and they promise function only; only pulling the plug isolates the unit.`,
            elements,
          ),
        ],
      }
    : {
        by: "nothing",
        verdict: "fail",
        reasons: [judged("fail", `${text}. Whoever turns one off finds the unit still live.`, elements)],
      };
}

function partlyBroken(matter: Matter, consumers: ConsumerIsolation[], breaking: string[]): MainsIsolation {
  const { view, isolation, inlet } = matter;
  const isBroken = ({ brokenBy }: ConsumerPole) => brokenBy.some((id) => breaking.includes(id));
  const broken = ["L", "N"].filter((pole) =>
    consumers.some(({ poles }) => poles.some((each) => each.pole === pole && isBroken(each))),
  );
  const left = ["L", "N"].filter((pole) =>
    consumers.some(({ poles }) => poles.some((each) => each.pole === pole && !isBroken(each))),
  );
  const named = names(view, breaking);
  const elements = [...breaking, inlet.id];
  if (left.length === 0) {
    return {
      by: "nothing",
      verdict: "fail",
      reasons: [
        judged(
          "fail",
          `Line and neutral of ${view.name(inlet.id)} are broken by different switches (${named}), not together.`,
          elements,
        ),
      ],
    };
  }
  const [breaks, promises] = breaking.length > 1 ? ["break", "promise"] : ["breaks", "promises"];
  const functional = breaking.every((id) => promiseOf(view, id) === "function");
  const single = broken.length === 1 && (inlet.polarised !== "yes" || broken[0] === "L");
  if (functional && single) {
    const pole = inlet.polarised === "yes" ? "the line" : "one conductor";
    return {
      by: "plug",
      verdict: "unknown",
      reasons: [
        judged(
          "unknown",
          `${named} ${breaks} ${pole} only and ${promises} function only; only pulling the plug isolates the unit. It must not be marked as isolating.${reversal(inlet, "with it off, the line may still come to what it switches")}`,
          elements,
        ),
      ],
    };
  }
  const still = stillLive(isolation, inlet.id);
  const reasons = [
    judged(
      "fail",
      `${named} ${breaks} only the ${list(broken.map(poleWord))} of ${view.name(inlet.id)}. The ${list(left.map(poleWord))} stays joined: this is not double-pole isolation.${reversal(inlet, "this may be the line")}`,
      elements,
      still,
    ),
    ...(still.length === 0
      ? []
      : [
          judged(
            "fail",
            `With every switch off, ${list(still)} stay live from ${view.name(inlet.id)}.`,
            [inlet.id],
            still,
          ),
        ]),
    ...breaking.flatMap((id) => {
      const mixed = mixedBody(view, isolation, id);
      return mixed === null ? [] : [judged(mixed.verdict, mixed.text, [id])];
    }),
  ];
  return { by: "nothing", verdict: "fail", reasons };
}

function reversal({ polarised }: ElementOf<"mains-inlet">, consequence: string): string {
  if (polarised === "yes") return "";
  return polarised === "no"
    ? ` The plug fits both ways round, so ${consequence}.`
    : ` Whether the plug fits both ways round is not known; ${consequence}.`;
}
