import type { Circuit } from "./circuit";
import { conduction, configurations, isReached, walk, type Position } from "./energise";
import { allAt } from "./isolation";
import type { ElementOf } from "./energy-map";

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
  /** Switch positions that this is about: all off, or one setting with on-off switches on. */
  setting: "off" | "on";
  capacitors: string[];
  bleeders: string[];
  /** `null`: some capacitance is not known. */
  nanofarads: number | null;
  /** Parallel bleeders, kΩ; `Infinity` without any, `null` when one is not known and no other is there. */
  kilohms: number | null;
  /** `null`: not known. */
  volts: number | null;
}

/** What the plug pins of an inlet hold after unplugging, with the switches off and on. */
export function pinCharges(
  circuit: Circuit,
  inlet: ElementOf<"mains-inlet">,
  supplyVolts: number,
  seconds: number,
): PinCharge[] {
  const settings: { setting: PinCharge["setting"]; positions: Map<string, Position> }[] = [
    { setting: "off", positions: allAt(circuit, "off") },
    ...configurations(circuit, () => null).map((positions) => ({ setting: "on" as const, positions })),
  ];
  return settings.map(({ setting, positions }) => {
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
    return {
      setting,
      capacitors: capacitors.map(({ id }) => id),
      bleeders: bleeders.map(({ id }) => id),
      nanofarads,
      kilohms,
      volts: voltsLeft(supplyVolts, nanofarads, kilohms, seconds),
    };
  });
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
