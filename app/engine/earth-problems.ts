import type { Element, EnergyMap } from "./energy-map";
import type { Problem } from "./problem";
import type { UnitFacts } from "./unit-facts";

/** What a class I unit lacks of protective earth, so that its map cannot be submitted. */
export function earthProblems(map: EnergyMap, { protectionClass }: UnitFacts): Problem[] {
  return protectionClass === "I" ? [...missingTerminal(map), ...freePins(map)] : [];
}

const makesMains = (element: Element) =>
  element.kind === "mains-inlet" || (element.kind === "converter" && element.output === "mains");

function missingTerminal({ elements }: EnergyMap): Problem[] {
  if (!elements.some(makesMains) || elements.some(({ kind }) => kind === "earth-terminal")) return [];
  const text = "A class I unit needs its protective-earth terminal on the map.";
  return [{ subject: null, field: null, text, blocking: true }];
}

function freePins(map: EnergyMap): Problem[] {
  const isUsed = (id: string) =>
    map.conductors
      .flatMap(({ from, to }) => [from, to])
      .some(({ element, terminal }) => element === id && terminal === "PE");
  return map.elements.flatMap((element): Problem[] => {
    if (element.kind !== "mains-inlet" || isUsed(element.id)) return [];
    const name = element.label === "" ? element.id : `${element.id} (${element.label})`;
    const text =
      element.earthPin === "no"
        ? `${name} has no earth pin, but a class I unit needs one.`
        : `${name}: its earth pin is connected to nothing.`;
    return [{ subject: { kind: "element", id: element.id }, field: null, text, blocking: true }];
  });
}
