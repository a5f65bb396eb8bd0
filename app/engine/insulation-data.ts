import type { Citation } from "./rule-set";

/** Rated impulse voltage in V peak by line-to-neutral voltage, overvoltage categories I to IV (IEC 60664-1 Table F.1). */
export const impulseTable: readonly {
  upTo: number;
  categories: readonly [number, number, number, number];
}[] = [
  { upTo: 50, categories: [330, 500, 800, 1500] },
  { upTo: 100, categories: [500, 800, 1500, 2500] },
  { upTo: 150, categories: [800, 1500, 2500, 4000] },
  { upTo: 300, categories: [1500, 2500, 4000, 6000] },
  { upTo: 600, categories: [2500, 4000, 6000, 8000] },
  { upTo: 1000, categories: [4000, 6000, 8000, 12000] },
];

/** Clearances in mm by impulse in kV, pollution degrees 1 to 3, inhomogeneous field (IEC 60664-1 Table F.2). */
export const clearanceTable: readonly { kilovolts: number; mm: readonly [number, number, number] }[] = [
  { kilovolts: 0.33, mm: [0.01, 0.2, 0.8] },
  { kilovolts: 0.4, mm: [0.02, 0.2, 0.8] },
  { kilovolts: 0.5, mm: [0.04, 0.2, 0.8] },
  { kilovolts: 0.6, mm: [0.06, 0.2, 0.8] },
  { kilovolts: 0.8, mm: [0.1, 0.2, 0.8] },
  { kilovolts: 1.0, mm: [0.15, 0.2, 0.8] },
  { kilovolts: 1.2, mm: [0.25, 0.25, 0.8] },
  { kilovolts: 1.5, mm: [0.5, 0.5, 0.8] },
  { kilovolts: 2.0, mm: [1.0, 1.0, 1.0] },
  { kilovolts: 2.5, mm: [1.5, 1.5, 1.5] },
  { kilovolts: 3.0, mm: [2.0, 2.0, 2.0] },
  { kilovolts: 4.0, mm: [3.0, 3.0, 3.0] },
  { kilovolts: 5.0, mm: [4.0, 4.0, 4.0] },
  { kilovolts: 6.0, mm: [5.5, 5.5, 5.5] },
  { kilovolts: 8.0, mm: [8.0, 8.0, 8.0] },
  { kilovolts: 10, mm: [11, 11, 11] },
  { kilovolts: 12, mm: [14, 14, 14] },
];

/** Creepage in mm by rms voltage; pollution degrees 2 and 3, material groups I, II, III (IEC 60664-1 Table F.4). */
export const creepageTable: readonly {
  volts: number;
  degree2: readonly [number, number, number];
  degree3: readonly [number, number, number];
}[] = [
  { volts: 10, degree2: [0.4, 0.4, 0.4], degree3: [1.0, 1.0, 1.0] },
  { volts: 12.5, degree2: [0.42, 0.42, 0.42], degree3: [1.05, 1.05, 1.05] },
  { volts: 16, degree2: [0.45, 0.45, 0.45], degree3: [1.1, 1.1, 1.1] },
  { volts: 20, degree2: [0.48, 0.48, 0.48], degree3: [1.2, 1.2, 1.2] },
  { volts: 25, degree2: [0.5, 0.5, 0.5], degree3: [1.25, 1.25, 1.25] },
  { volts: 32, degree2: [0.53, 0.53, 0.53], degree3: [1.3, 1.3, 1.3] },
  { volts: 40, degree2: [0.56, 0.8, 1.1], degree3: [1.4, 1.6, 1.8] },
  { volts: 50, degree2: [0.6, 0.85, 1.2], degree3: [1.5, 1.7, 1.9] },
  { volts: 63, degree2: [0.63, 0.9, 1.25], degree3: [1.6, 1.8, 2.0] },
  { volts: 80, degree2: [0.67, 0.95, 1.3], degree3: [1.7, 1.9, 2.1] },
  { volts: 100, degree2: [0.71, 1.0, 1.4], degree3: [1.8, 2.0, 2.2] },
  { volts: 125, degree2: [0.75, 1.05, 1.5], degree3: [1.9, 2.1, 2.4] },
  { volts: 160, degree2: [0.8, 1.1, 1.6], degree3: [2.0, 2.2, 2.5] },
  { volts: 200, degree2: [1.0, 1.4, 2.0], degree3: [2.5, 2.8, 3.2] },
  { volts: 250, degree2: [1.25, 1.8, 2.5], degree3: [3.2, 3.6, 4.0] },
  { volts: 320, degree2: [1.6, 2.2, 3.2], degree3: [4.0, 4.5, 5.0] },
  { volts: 400, degree2: [2.0, 2.8, 4.0], degree3: [5.0, 5.6, 6.3] },
  { volts: 500, degree2: [2.5, 3.6, 5.0], degree3: [6.3, 7.1, 8.0] },
  { volts: 630, degree2: [3.2, 4.5, 6.3], degree3: [8.0, 9.0, 10.0] },
  { volts: 800, degree2: [4.0, 5.6, 8.0], degree3: [10.0, 11.0, 12.5] },
  { volts: 1000, degree2: [5.0, 7.1, 10.0], degree3: [12.5, 14.0, 16.0] },
];

/** Factor on clearances by height above sea level in m, straight between rows (IEC 60664-1 Table A.2). */
export const altitudeTable: readonly (readonly [number, number])[] = [
  [2000, 1.0],
  [3000, 1.14],
  [4000, 1.29],
  [5000, 1.48],
  [6000, 1.7],
  [7000, 1.95],
  [8000, 2.25],
  [9000, 2.62],
  [10000, 3.02],
  [15000, 6.67],
  [20000, 14.5],
];

export const clearanceCitation: Citation = {
  standard: "IEC 60664-1",
  clause: "Tables F.1 and F.2",
  edition: "not checked",
  mark: "V",
  note: "Overvoltage category II. The rows 1.5, 2.5, 4 and 6 kV were seen, the others are from memory; the rule for reinforced insulation is from memory.",
};
export const altitudeCitation: Citation = {
  standard: "IEC 60664-1",
  clause: "Table A.2, factor on clearances by height",
  edition: "not checked",
  mark: "V",
  note: "1.14 to 1.48 and 2.25 to 6.67 were seen, 1.70, 1.95 and 14.5 are from memory.",
};
export const creepageCitation: Citation = {
  standard: "IEC 60664-1",
  clause: "Table F.4",
  edition: "not checked",
  mark: "V",
  note: "Material group III, next higher row. Twice as much for reinforced insulation (from memory).",
};

export type Category = 1 | 2 | 3 | 4;
export type PollutionDegree = 2 | 3;
export type MaterialGroup = "I" | "II" | "III";

/** Rated impulse voltage, V peak; `null` above the table. */
export function ratedImpulse(lineToNeutral: number, category: Category): number | null {
  return impulseTable.find(({ upTo }) => lineToNeutral <= upTo)?.categories[category - 1] ?? null;
}

const preferredImpulses = [330, 500, 800, 1500, 2500, 4000, 6000, 8000, 12000];

/** Impulse that reinforced insulation is made for: the next preferred step, else 160 % (from memory). */
export function reinforcedImpulse(basic: number): number {
  const at = preferredImpulses.indexOf(basic);
  return (at < 0 ? undefined : preferredImpulses[at + 1]) ?? basic * 1.6;
}

/** Height factor; 1 up to 2000 m, `null` above the table. */
export function altitudeFactor(metres: number): number | null {
  if (metres <= 2000) return 1;
  for (let index = 1; index < altitudeTable.length; index++) {
    const low = altitudeTable[index - 1];
    const high = altitudeTable[index];
    if (low === undefined || high === undefined || metres > high[0]) continue;
    return low[1] + ((metres - low[0]) / (high[0] - low[0])) * (high[1] - low[1]);
  }
  return null;
}

/** Clearance for an impulse in V peak, mm, straight between rows; `null` above the table. */
export function clearanceFor(impulse: number, degree: PollutionDegree): number | null {
  const kilovolts = impulse / 1000;
  const column = degree - 1;
  const first = clearanceTable[0];
  if (first !== undefined && kilovolts <= first.kilovolts) return first.mm[column] ?? null;
  for (let index = 1; index < clearanceTable.length; index++) {
    const low = clearanceTable[index - 1];
    const high = clearanceTable[index];
    if (low === undefined || high === undefined || kilovolts > high.kilovolts) continue;
    const [from, to] = [low.mm[column], high.mm[column]];
    if (from === undefined || to === undefined) return null;
    return from + ((kilovolts - low.kilovolts) / (high.kilovolts - low.kilovolts)) * (to - from);
  }
  return null;
}

/** Creepage for basic insulation, mm: the next higher row of the table; `null` above it. */
export function creepageFor(volts: number, degree: PollutionDegree, group: MaterialGroup): number | null {
  const row = creepageTable.find((each) => volts <= each.volts);
  const column = group === "I" ? 0 : group === "II" ? 1 : 2;
  return (degree === 2 ? row?.degree2 : row?.degree3)?.[column] ?? null;
}

export interface Distances {
  clearanceMm: number;
  creepageMm: number;
}

/** Distances between mains and something else for a grade of insulation; `null` outside the tables. */
export function requiredDistances(
  volts: number,
  grade: "basic" | "reinforced",
  {
    degree,
    group = "III",
    category = 2,
    altitudeM = 2000,
  }: { degree: PollutionDegree; group?: MaterialGroup; category?: Category; altitudeM?: number },
): Distances | null {
  const impulse = ratedImpulse(volts, category);
  const factor = altitudeFactor(altitudeM);
  if (impulse === null || factor === null) return null;
  const clearance = clearanceFor(grade === "basic" ? impulse : reinforcedImpulse(impulse), degree);
  const creepage = creepageFor(volts, degree, group);
  if (clearance === null || creepage === null) return null;
  const clearanceMm = clearance * factor;
  return { clearanceMm, creepageMm: Math.max(clearanceMm, grade === "basic" ? creepage : 2 * creepage) };
}
