import { circuitContradictions } from "./contradictions";
import { earthProblems } from "./earth-problems";
import { elementKinds, terminalsOf, type FieldDescriptor } from "./elements";
import type { Element, EnergyMap } from "./energy-map";
import type { Problem } from "./problem";
import type { UnitFacts } from "./unit-facts";

/** What is missing or contradictory in a map, in the order of its rows. Blocking ones keep it from being submitted. */
export function mapProblems(map: EnergyMap, facts: UnitFacts): Problem[] {
  return [
    ...wholeMapProblems(map, facts),
    ...duplicateProblems(map),
    ...earthProblems(map, facts),
    ...map.elements.flatMap((element) => elementProblems(element, map)),
    ...map.conductors.flatMap((conductor) => conductorProblems(conductor, map)),
    ...circuitContradictions(map, facts),
  ];
}

const whole = (text: string, field: string | null = null, blocking = true): Problem => ({
  subject: null,
  field,
  text,
  blocking,
});

const nameOf = ({ id, label }: Element) => (label === "" ? id : `${id} (${label})`);

function wholeMapProblems(map: EnergyMap, facts: UnitFacts): Problem[] {
  const problems: Problem[] = [];
  const kinds = new Set(map.elements.map(({ kind }) => kind));
  if (map.elements.length === 0)
    return [whole("The map is empty: add where energy enters, what it passes and where it ends.")];
  if (!kinds.has("mains-inlet") && !kinds.has("battery") && !kinds.has("dc-inlet")) {
    problems.push(whole("No source of energy is on the map: add a mains inlet, a battery or a DC inlet."));
  }
  if (
    !["load", "outlet", "fan", "indicator"].some((kind) => map.elements.some((each) => each.kind === kind))
  ) {
    problems.push(whole("Nothing on the map uses the energy: add a load or an output connector."));
  }
  if (kinds.has("mains-inlet") && facts.protectionClass === "I") {
    if (facts.cordLengthM === null || facts.cordLengthM === undefined) {
      problems.push(
        whole(
          "The length of the supply cord is not known: the earth limit depends on it.",
          "cordLengthM",
          false,
        ),
      );
    }
    if (facts.cordAreaMm2 === null || facts.cordAreaMm2 === undefined) {
      problems.push(
        whole(
          "The cross-section of the supply cord is not known: the earth limit may depend on it.",
          "cordAreaMm2",
          false,
        ),
      );
    }
  }
  return problems;
}

function duplicateProblems(map: EnergyMap): Problem[] {
  const seen = new Map<string, string>();
  const problems: Problem[] = [];
  const look = (kind: "element" | "conductor", id: string) => {
    // F1 and f1 can't be told apart on a label or by word of mouth.
    const first = seen.get(id.toLowerCase());
    if (first !== undefined) {
      problems.push({
        subject: { kind, id },
        field: "id",
        text:
          first === id
            ? `The id ${id} is used more than once.`
            : `The ids ${first} and ${id} differ only in capital letters: give one of them another id.`,
        blocking: true,
      });
    }
    seen.set(id.toLowerCase(), first ?? id);
  };
  for (const { id } of map.elements) look("element", id);
  for (const { id } of map.conductors) look("conductor", id);
  return problems;
}

/** Data that the engine can do without: it then says "unknown" where it matters, and the bench finds out. */
const optionalFields: Partial<Record<Element["kind"], string[]>> = {
  "mains-inlet": ["prospectiveAmps"],
  battery: ["maxDischargeAmps", "internalMilliohms"],
  "isolated-supply": ["leakageMilliamps", "conductsBackwards"],
  charger: ["leakageMilliamps", "conductsBackwards"],
  converter: ["conductsBackwards"],
  fuse: ["breakingAmps", "breakingLetter", "speed"],
  breaker: ["breakingAmps", "curve"],
  bms: ["underVoltsPerCell", "tripAmps", "coldChargeCutoff"],
  switch: ["coilFedBy", "reinforcedBetweenPoles", "gapMm"],
  diode: ["forwardVolts", "leakageMicroamps"],
  "accessible-part": ["clearanceMm", "creepageMm"],
  "earth-terminal": ["lockedFixing"],
};

function elementProblems(element: Element, map: EnergyMap): Problem[] {
  const problems: Problem[] = [];
  const about = (field: string | null, text: string, blocking: boolean) =>
    problems.push({ subject: { kind: "element", id: element.id }, field, text, blocking });
  if (element.label.trim() === "") about("label", `${element.id} has no name.`, true);
  if (element.example) {
    about(
      null,
      `${nameOf(element)} still has the starter's example figures: enter or confirm those of the part itself.`,
      true,
    );
  }

  const data: Record<string, unknown> = { ...element };
  const fields: FieldDescriptor[] = elementKinds[element.kind].fields;
  for (const field of fields) {
    if (!isUnknown(data[field.name])) continue;
    // A switch moved by hand has no coil.
    if (field.name === "coilFedBy" && element.kind === "switch" && element.actuator === "hand") continue;
    const blocking = !(optionalFields[element.kind] ?? []).includes(field.name);
    about(field.name, `${nameOf(element)}: ${lowerFirst(field.label)} is not known.`, blocking);
  }

  const joined = new Set(
    map.conductors
      .flatMap(({ from, to }) => [from, to])
      .filter((end) => end.element === element.id)
      .map((end) => end.terminal),
  );
  const terminals = terminalsOf(element);
  if (element.kind === "accessible-part") {
    // A part behind double insulation is joined to nothing, and that is right.
  } else if (joined.size === 0) {
    about(null, `${nameOf(element)} is connected to nothing.`, true);
  } else {
    for (const { name, label, role } of terminals) {
      const mayBeFree =
        role === "earth" || element.kind === "switch" || element.kind === "breaker" || element.kind === "bms";
      if (!joined.has(name) && !mayBeFree)
        about(null, `${nameOf(element)}: terminal ${name} (${label}) is connected to nothing.`, true);
    }
  }
  if (
    element.kind === "switch" &&
    element.coilFedBy !== null &&
    !map.elements.some(({ id }) => id === element.coilFedBy)
  ) {
    about(
      "coilFedBy",
      `${nameOf(element)}: there is no element ${element.coilFedBy} to feed its coil.`,
      true,
    );
  }
  return problems;
}

const isUnknown = (value: unknown) => value === null || value === "unknown";

const lowerFirst = (text: string) =>
  /^[A-Z][A-Z]/.test(text) ? text : text.charAt(0).toLowerCase() + text.slice(1);

function conductorProblems(conductor: EnergyMap["conductors"][number], map: EnergyMap): Problem[] {
  const problems: Problem[] = [];
  const about = (field: string | null, text: string, blocking: boolean) =>
    problems.push({ subject: { kind: "conductor", id: conductor.id }, field, text, blocking });
  for (const side of ["from", "to"] as const) {
    const end = conductor[side];
    const element = map.elements.find(({ id }) => id === end.element);
    if (element === undefined)
      about(side, `${conductor.id} leads to ${end.element}, which is not on the map.`, true);
    else if (!terminalsOf(element).some(({ name }) => name === end.terminal)) {
      about(
        side,
        `${conductor.id} leads to terminal ${end.terminal}, which ${nameOf(element)} does not have.`,
        true,
      );
    }
  }
  if (conductor.from.element === conductor.to.element && conductor.from.terminal === conductor.to.terminal) {
    about("to", `${conductor.id} begins and ends at the same terminal.`, true);
  }
  if (conductor.area === null) about("area", `${conductor.id}: its cross-section is not known.`, true);
  if (conductor.lengthM === null) about("lengthM", `${conductor.id}: its length is not known.`, false);
  if (conductor.insulation === "unknown")
    about("insulation", `${conductor.id}: its insulation is not known.`, true);
  if (conductor.insulation === "none" && conductor.circuit === "mains") {
    about("insulation", `${conductor.id} is a bare conductor on mains.`, false);
  }
  return problems;
}
