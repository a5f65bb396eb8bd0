import type { Conductor } from "./energy-map";
import type { Citation } from "./rule-set";

/** Largest direct-current resistance at 20 °C, Ω/km, class 5 plain copper, by mm² (IEC 60228). */
export const class5OhmsPerKm: readonly (readonly [number, number])[] = [
  [0.5, 39.0],
  [0.75, 26.0],
  [1.0, 19.5],
  [1.25, 15.6],
  [1.5, 13.3],
  [2.5, 7.98],
  [4, 4.95],
  [6, 3.3],
  [10, 1.91],
  [16, 1.21],
];
export const class5Citation: Citation = {
  standard: "IEC 60228",
  clause: "class 5, plain copper",
  edition: "not checked",
  mark: "V",
  note: "1.25 mm² from memory.",
};

/** Current that a flexible cord may carry, A, by mm² (BS 7671 Table 4F3A, single phase or direct current). */
export const cordAmpacity: readonly (readonly [number, number])[] = [
  [0.5, 3],
  [0.75, 6],
  [1.0, 10],
  [1.25, 13],
  [1.5, 16],
  [2.5, 25],
  [4, 32],
];
export const cordCitation: Citation = {
  standard: "BS 7671",
  clause: "Table 4F3A",
  edition: "not checked",
  mark: "V",
  note: "IEC 60335-1 Table 11 gives the same up to 4 mm².",
};

/** Factor on a 60 °C cord's current above 30 °C of air, as pairs of °C and factor (with BS 7671 Table 4F3A). */
export const ambientFactors: readonly (readonly [number, number])[] = [
  [30, 1],
  [35, 0.91],
  [40, 0.82],
  [45, 0.71],
  [50, 0.58],
  [55, 0.41],
];

/** Largest appliance current for a cord's area, A, by mm² (IEC 60335-1 Table 11, clause 25.8). */
export const applianceCordAmps: readonly (readonly [number, number])[] = [
  [0.5, 3],
  [0.75, 6],
  [1.0, 10],
  [1.5, 16],
  [2.5, 25],
  [4, 32],
  [6, 40],
  [10, 63],
];

export const applianceCordCitation: Citation = {
  standard: "IEC 60335-1",
  clause: "Table 11, clause 25.8",
  edition: "not checked",
  mark: "V",
};

/** Free-air "chassis" currents, A, by gauge: hobby figures, not a mains rating. */
export const chassisAmps: readonly (readonly [number, number])[] = [
  [10, 55],
  [12, 41],
  [14, 32],
  [16, 22],
  [18, 16],
  [20, 11],
  [22, 7],
  [24, 3.5],
  [26, 2.2],
];
export const chassisCitation: Citation = {
  standard: "workshop practice",
  clause: "half the free-air current of an enclosed bundle",
  edition: "none",
  mark: "M",
  note: "The free-air table is folk guidance. Not for mains conductors.",
};

/** Diameter of a gauge in mm: 0.127 · 92^((36 − n)/39). */
export const awgMillimetres = (gauge: number): number => 0.127 * 92 ** ((36 - gauge) / 39);
/** Cross-section of a gauge in mm². */
export const awgSquareMillimetres = (gauge: number): number => (Math.PI / 4) * awgMillimetres(gauge) ** 2;
/** Resistance of solid copper at 20 °C, Ω/km, for a cross-section in mm². */
export const solidOhmsPerKm = (mm2: number): number => 17.241 / mm2;

/** Cross-section of a conductor in mm², or `null` when not known. */
export function squareMillimetres({ area }: Pick<Conductor, "area">): number | null {
  if (area === null) return null;
  return "mm2" in area ? area.mm2 : awgSquareMillimetres(area.awg);
}

/** Resistance of a copper conductor, Ω, at a temperature, from the class 5 table or, off the table, from its area. */
export function conductorOhms(mm2: number, lengthM: number, celsius = 20): number {
  const row = class5OhmsPerKm.find(([area]) => Math.abs(area - mm2) < 1e-9);
  const perKm = row?.[1] ?? 1.05 * solidOhmsPerKm(mm2);
  return ((perKm * lengthM) / 1000) * ((234.5 + celsius) / 254.5);
}

export interface Ampacity {
  amps: number;
  /** The conductor is thicker than the table goes: it carries this at least. */
  atLeast: boolean;
  citation: Citation;
  /** How it was got, in words. */
  basis: string;
}

/** What a conductor may carry, A: the next smaller area of the cord table for mains, half the free-air current for ELV. */
export function ampacityOf(conductor: Conductor): Ampacity | null {
  const mm2 = squareMillimetres(conductor);
  if (mm2 === null) return null;
  const factor = ambientFactor(conductor.ambientC ?? null);
  if (factor === null) return null;
  const warm = factor < 1 ? `, times ${factor} for ${conductor.ambientC} °C` : "";
  if (conductor.circuit === "elv" && mm2 <= 5.3) {
    const amps = freeAirAmps(mm2);
    if (amps === null) return null;
    return {
      amps: roundDown((amps / 2) * factor),
      atLeast: false,
      citation: chassisCitation,
      basis: `half the free-air current${warm}`,
    };
  }
  const table = conductor.circuit === "elv" ? applianceCordAmps : cordAmpacity;
  const row = [...table].reverse().find(([area]) => area <= mm2 + 1e-9);
  if (row === undefined) return null;
  const isThicker = row === table.at(-1) && mm2 > row[0] + 1e-9;
  return {
    amps: roundDown(row[1] * factor),
    atLeast: isThicker,
    citation: conductor.circuit === "elv" ? applianceCordCitation : cordCitation,
    basis: `the cord table's ${row[0]} mm²${isThicker ? ", where the table ends" : ""}${warm}`,
  };
}

const roundDown = (amps: number) => Math.floor(amps * 100 + 1e-6) / 100;

/** Factor for warm air; 1 when nothing is stated or it is 30 °C or cooler; `null` above the table. Next hotter row. */
export function ambientFactor(celsius: number | null): number | null {
  if (celsius === null) return 1;
  return ambientFactors.find(([limit]) => celsius <= limit)?.[1] ?? null;
}

/** Free-air current for an area, A, straight between table gauges on a log-log scale; `null` below the smallest gauge. */
export function freeAirAmps(mm2: number): number | null {
  const points = chassisAmps.map(([gauge, amps]) => [awgSquareMillimetres(gauge), amps] as const).reverse();
  for (let index = 1; index < points.length; index++) {
    const low = points[index - 1];
    const high = points[index];
    if (low === undefined || high === undefined || mm2 > high[0] * 1.001) continue;
    if (mm2 < low[0] * 0.999) return null;
    const share = (Math.log(mm2) - Math.log(low[0])) / (Math.log(high[0]) - Math.log(low[0]));
    return low[1] * (high[1] / low[1]) ** Math.min(1, Math.max(0, share));
  }
  return points.at(-1)?.[1] ?? null;
}

/** Constants of copper for the adiabatic formula (IEC 60949 form). */
const copper = { beta: 234.5, heat: 3.45e-3, resistivity: 17.241e-6 };

/** k in I²t ≤ k²S², A·√s/mm², from start to final temperature of the insulation. */
export function adiabaticK(startC: number, finalC: number): number {
  const { beta, heat, resistivity } = copper;
  return Math.sqrt(((heat * (beta + 20)) / resistivity) * Math.log((beta + finalC) / (beta + startC)));
}

/** Longest time that a conductor withstands a current, s: (k·S/I)². Holds up to 5 s. */
export const adiabaticSeconds = (k: number, mm2: number, amps: number): number => ((k * mm2) / amps) ** 2;
/** Smallest cross-section for a current and a time, mm²: I·√t/k. */
export const adiabaticArea = (k: number, amps: number, seconds: number): number =>
  (amps * Math.sqrt(seconds)) / k;

/** Voltage lost along both conductors of a run, V, for direct or single-phase current near unity power factor. */
export const voltageDrop = (mm2: number, lengthM: number, amps: number, celsius = 20): number =>
  2 * conductorOhms(mm2, lengthM, celsius) * amps;
