import type { Circuit } from "./circuit";
import { conduction, isReached, walk, type Position } from "./energise";
import type { ElementOf } from "./energy-map";
import { allAt } from "./isolation";
import { list } from "./wording";

/** Voltage left on a capacitor, V: V0 · e^(−t/RC), from the peak of the supply. */
export function residualVolts(
  supplyVolts: number,
  nanofarads: number,
  kilohms: number,
  seconds: number,
): number {
  return Math.SQRT2 * supplyVolts * Math.exp(-seconds / (nanofarads * 1e-9 * kilohms * 1e3));
}

/** Largest bleeder, kΩ, that brings the peak of the supply below a limit in time: t / (C · ln(V0/limit)). */
export function largestBleeder(
  supplyVolts: number,
  nanofarads: number,
  limitVolts: number,
  seconds: number,
): number {
  return seconds / (nanofarads * 1e-9 * Math.log((Math.SQRT2 * supplyVolts) / limitVolts)) / 1e3;
}

export interface PinCharge {
  /** Switch positions that this is about: all off, all on, or which are on and which off, in words. */
  setting: string;
  capacitors: string[];
  bleeders: string[];
  /** `null`: some capacitance is not known. */
  nanofarads: number | null;
  /** Parallel bleeders, kΩ; `Infinity` without any, `null` when one is not known and no other is there. */
  kilohms: number | null;
  /** `null`: not known. */
  volts: number | null;
}

/** Switches that are tried in every combination; of more than these the answer is not complete. */
const mostSwitches = 8;

/**
 * What the plug pins of an inlet hold after unplugging: with all switches off, with all on, and in each other combination
 * that joins other capacitors or bleeders to the pins.
 */
export function pinCharges(
  circuit: Circuit,
  inlet: ElementOf<"mains-inlet">,
  supplyVolts: number,
  seconds: number,
): PinCharge[] {
  const ends = [allAt(circuit, "off"), allAt(circuit, "on")].map((positions) =>
    chargeAt(circuit, inlet, positions, supplyVolts, seconds),
  );
  const off: PinCharge[] = ends.slice(0, 1).map((each) => ({ ...each, setting: "off" }));
  const on: PinCharge[] = ends.slice(1).map((each) => ({ ...each, setting: "on" }));
  const found = new Map([...off, ...on].map((each) => [outcomeOf(each), each]));
  for (const positions of combinations(circuit, switchesAtPins(circuit, inlet).slice(0, mostSwitches))) {
    const charge = chargeAt(circuit, inlet, positions, supplyVolts, seconds);
    if (!found.has(outcomeOf(charge))) found.set(outcomeOf(charge), charge);
  }
  return [...off, ...on, ...[...found.values()].filter((each) => !off.includes(each) && !on.includes(each))];
}

/** All combinations of the switches that can join something to the pins were worked out. */
export const chargesComplete = (circuit: Circuit, inlet: ElementOf<"mains-inlet">): boolean =>
  switchesAtPins(circuit, inlet).length <= mostSwitches;

/** "with the switches off", "with S1 on and S2 off". */
export const settingText = ({ setting }: Pick<PinCharge, "setting">): string =>
  setting === "off" || setting === "on" ? `with the switches ${setting}` : `with ${setting}`;

const outcomeOf = ({ capacitors, bleeders }: PinCharge) => `${capacitors.join(" ")}|${bleeders.join(" ")}`;

/** Switches whose contacts hang on the pins when every contact is taken as closed. */
function switchesAtPins(circuit: Circuit, inlet: ElementOf<"mains-inlet">): string[] {
  const conducts = conduction(circuit, { positions: allAt(circuit, "any"), includePossible: false });
  const reaches = ["L", "N"].map((pole) =>
    walk(circuit, conducts, circuit.view.nodeOf(inlet.id, pole), "either"),
  );
  const met = circuit.links.flatMap(({ kind, element, a, b }) =>
    kind === "contact" &&
    element !== null &&
    reaches.some((reach) => isReached(reach, a) || isReached(reach, b))
      ? [element]
      : [],
  );
  return [...new Set(met)];
}

/** Every combination of some switches, those with few on first; the others stay on. */
function combinations(circuit: Circuit, varied: string[]): Map<string, Position>[] {
  return Array.from({ length: 2 ** varied.length }, (_, bits) => bits)
    .sort((a, b) => onesIn(a) - onesIn(b))
    .map((bits) => {
      const positions = allAt(circuit, "on");
      varied.forEach((id, index) => positions.set(id, (bits >> index) & 1 ? "on" : "off"));
      return positions;
    });
}

const onesIn = (bits: number) => [...bits.toString(2)].filter((digit) => digit === "1").length;

function chargeAt(
  circuit: Circuit,
  inlet: ElementOf<"mains-inlet">,
  positions: Map<string, Position>,
  supplyVolts: number,
  seconds: number,
): PinCharge {
  const conducts = conduction(circuit, { positions, includePossible: false });
  const line = walk(circuit, conducts, circuit.view.nodeOf(inlet.id, "L"), "either");
  const neutral = walk(circuit, conducts, circuit.view.nodeOf(inlet.id, "N"), "either");
  const across = (id: string) => {
    const [first, second] = [circuit.view.nodeOf(id, "1"), circuit.view.nodeOf(id, "2")];
    return (
      (isReached(line, first) && isReached(neutral, second)) ||
      (isReached(line, second) && isReached(neutral, first))
    );
  };
  const capacitors = circuit.view.ofKind("x-capacitor").filter(({ id }) => across(id));
  const bleeders = circuit.view.ofKind("bleeder").filter(({ id }) => across(id));
  const nanofarads = capacitors.some((each) => each.nanofarads === null)
    ? null
    : capacitors.reduce((sum, each) => sum + (each.nanofarads ?? 0), 0);
  const kilohms = parallel(bleeders.map((each) => each.kilohms));
  const at = (position: Position) =>
    [...positions].filter(([, each]) => each === position).map(([id]) => circuit.view.name(id));
  return {
    setting: (["on", "off"] as const)
      .map((position) => ({ position, names: at(position) }))
      .flatMap(({ position, names }) => (names.length === 0 ? [] : [`${list(names)} ${position}`]))
      .join(" and "),
    capacitors: capacitors.map(({ id }) => id),
    bleeders: bleeders.map(({ id }) => id),
    nanofarads,
    kilohms,
    volts: voltsLeft(supplyVolts, nanofarads, kilohms, seconds),
  };
}

function parallel(all: (number | null)[]): number | null {
  const known = all.filter((each): each is number => each !== null);
  // A bleeder that is not known only ever helps: leaving it out stays on the safe side.
  if (known.length === 0) return all.length === 0 ? Infinity : null;
  return 1 / known.reduce((sum, each) => sum + 1 / each, 0);
}

function voltsLeft(
  supplyVolts: number,
  nanofarads: number | null,
  kilohms: number | null,
  seconds: number,
): number | null {
  if (nanofarads === null || kilohms === null) return null;
  if (nanofarads === 0) return 0;
  return Number.isFinite(kilohms)
    ? residualVolts(supplyVolts, nanofarads, kilohms, seconds)
    : Math.SQRT2 * supplyVolts;
}
