import type { ElementOf } from "./energy-map";
import type { Citation } from "./rule-set";

/** Preferred rated currents of miniature fuses, A: the R10 series 1 to 8 over the decades 10 mA to 10 A, then 12.5 and 16 A. */
export const miniatureFuseRatings: number[] = [0.01, 0.1, 1, 10]
  .flatMap((decade) =>
    [1, 1.25, 1.6, 2, 2.5, 3.15, 4, 5, 6.3, 8].map((step) => Number((step * decade).toPrecision(4))),
  )
  .filter((rating) => rating <= 16 && rating >= 0.032);

export const miniatureFuseCitation: Citation = {
  standard: "IEC 60127-1, ISO 3",
  clause: "preferred rated currents, R10",
  edition: "not checked",
  mark: "V",
  note: "1 to 16 A seen; the rest from memory.",
};

/** Ratings of blade fuses in common sale, A. From memory. */
export const bladeFuseRatings: number[] = [1, 2, 3, 4, 5, 7.5, 10, 15, 20, 25, 30, 40];
/** Ratings of BS 1362 plug fuses: 3 and 13 A preferred, others made. */
export const plugFuseRatings: number[] = [1, 2, 3, 5, 7, 10, 13];
/** Ratings of bolt-down strip fuses in common sale, A. From memory. */
export const boltDownRatings: number[] = [30, 40, 50, 60, 70, 80, 100, 125, 150, 175, 200, 250, 300];
/** Ratings of small circuit breakers, A. From memory (IEC 60898-1). */
export const breakerRatings: number[] = [1, 2, 3, 4, 6, 8, 10, 13, 16, 20, 25, 32, 40, 50, 63];

type Fuse = ElementOf<"fuse">;

export function standardRatings(device: Fuse | ElementOf<"breaker">): number[] {
  if (device.kind === "breaker") return breakerRatings;
  switch (device.standard) {
    case "blade":
      return bladeFuseRatings;
    case "bs-1362":
      return plugFuseRatings;
    case "bolt-down":
    case "class-t":
      return boltDownRatings;
    default:
      return miniatureFuseRatings;
  }
}

/**
 * Smallest standard rating that carries the load and does not exceed the conductor; `null` when there is none.
 * A UL fuse is loaded to 75 % of its rating at most (25 °C), an IEC one to its rating.
 */
export function proposeRating(
  loadAmps: number,
  ampacityAmps: number,
  ratings: number[],
  loadable = 1,
): number | null {
  const needed = loadAmps / loadable;
  return ratings.find((rating) => rating >= needed && rating <= ampacityAmps) ?? null;
}

/** Share of its rating that a fuse may carry for long, and where that is said. */
export function loadableShare(standard: Fuse["standard"]): { share: number; citation: Citation } {
  return standard === "ul-248-14"
    ? {
        share: 0.75,
        citation: {
          standard: "UL 248-14",
          clause: "maker's guidance, 25 °C",
          edition: "not checked",
          mark: "V",
        },
      }
    : {
        share: 1,
        citation: { standard: "IEC 60127-1", clause: "rated current", edition: "not checked", mark: "V" },
      };
}

/**
 * Load that a fuse must be rated for when warm: load ÷ (share · (1 + k·(T − 25))), k being the derating per kelvin,
 * about −0.005 for slow and −0.001 to −0.002 for fast fuses (from memory; the maker's curve counts).
 */
export function neededRating(loadAmps: number, share: number, ambientC: number, perKelvin: number): number {
  return loadAmps / (share * (1 + perKelvin * (ambientC - 25)));
}

export interface BreakingCapacity {
  amps: number;
  citation: Citation;
}

/**
 * Breaking capacity that can be relied on: the maker's figure, or what the type guarantees, and of both the smaller. Letters and
 * BS 1362 speak of alternating voltage only: for direct voltage the maker's own figure counts alone, held down by the letter.
 * `null` when nothing guarantees any.
 */
export function guaranteedBreaking(fuse: Fuse, direct = false): BreakingCapacity | null {
  const stated: BreakingCapacity | null =
    fuse.breakingAmps === null
      ? null
      : {
          amps: fuse.breakingAmps,
          citation: {
            standard: "maker's data",
            clause: "breaking capacity",
            edition: "as entered",
            mark: "C",
          },
        };
  const byType = typeBreaking(fuse);
  if (stated === null) return direct ? null : byType;
  return byType !== null && byType.amps < stated.amps ? byType : stated;
}

/** What the standard guarantees for alternating voltage; `null` when it guarantees none. */
function typeBreaking(fuse: Fuse): BreakingCapacity | null {
  if (fuse.standard === "bs-1362") {
    return {
      amps: 6000,
      citation: { standard: "BS 1362", clause: "breaking capacity", edition: "not checked", mark: "M" },
    };
  }
  if (fuse.standard !== "iec-60127") return null;
  switch (fuse.breakingLetter) {
    case "L":
      return fuse.ratingAmps === null
        ? null
        : {
            amps: lowBreaking(fuse.ratingAmps),
            citation: {
              standard: "IEC 60127-2",
              clause: "sheets 2 and 3",
              edition: "not checked",
              mark: "V",
            },
          };
    case "E":
      return {
        amps: 150,
        citation: { standard: "IEC 60127-2", clause: "sheet 6", edition: "not checked", mark: "M" },
      };
    case "H":
      return {
        amps: fuse.ratingAmps !== null && fuse.ratingAmps <= largestHighBreaking ? 1500 : 500,
        citation: {
          standard: "IEC 60127-2",
          clause: "sheets 1 and 5",
          edition: "not checked",
          mark: "V",
          note: `500 A at the largest ratings; the border at ${largestHighBreaking} A is from memory.`,
        },
      };
    default:
      return null;
  }
}

/** Largest rating, A, for which letter H stands for 1500 A. From memory: the standard's sheets end at 10 A. */
const largestHighBreaking = 10;

/** Low breaking capacity: the greater of 35 A and ten times the rating (IEC 60127-2, sheets 2 and 3). */
export function lowBreaking(ratingAmps: number): number {
  return Math.max(35, 10 * ratingAmps);
}

/** Current of a dead short through the given resistances, A; `null` when any is not known or they sum to nought. */
export function prospectiveCurrent(volts: number | null, ...ohms: (number | null)[]): number | null {
  if (volts === null) return null;
  let sum = 0;
  for (const each of ohms) {
    if (each === null) return null;
    sum += each;
  }
  return sum > 0 ? volts / sum : null;
}
