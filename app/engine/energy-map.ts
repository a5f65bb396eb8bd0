import { z } from "zod";
import { tooLong, toOneLine } from "./typed-text";

/**
 * The energy map: a one-line description of where energy comes from, what it passes and where it ends.
 * Every datum that may be unknown is `null` or has an "unknown" member; nothing is filled in silently.
 * The schema checks shape only, so that a half-made map can be saved. What is missing or contradictory is told by
 * `mapProblems` (see problems.ts).
 */

/** Ids are short and printable on a drawing: "F1", "BT1", "W12". */
export const idSchema = z
  .string()
  .regex(/^[A-Za-z][A-Za-z0-9_-]{0,15}$/, "Use a letter, then letters, digits, _ or - (16 at most).");

/** Yes, no or not known: three values everywhere, so that "not known" can never be read as "no". */
export const triState = z.enum(["yes", "no", "unknown"]);
export type TriState = z.infer<typeof triState>;

const label = z
  .string("Write a text.")
  .max(80, tooLong(80))
  .refine((text) => toOneLine(text) === text, "Write it in one line, without hidden signs.");
/** The data come from a starter, and nobody has said yet that they are those of the part itself. */
const example = z
  .literal(true)
  .optional()
  .describe("The figures are a starter's example and not yet those of the part itself.");
/** A quantity above nought, or `null` when nobody knows it. */
const quantity = z.number().positive().max(1e7).nullable();
/** A rating that a maker may not give at all: 0 says "the maker states none", `null` says "not known". */
const rating = z.number().nonnegative().max(1e7).nullable();

const insulationGrade = z.enum(["none", "functional", "basic", "reinforced", "unknown"]);
export type InsulationGrade = z.infer<typeof insulationGrade>;

const supplyKind = z.enum(["mains", "dc"]);

function element<Kind extends string, Shape extends z.ZodRawShape>(kind: Kind, shape: Shape) {
  return z.strictObject({ id: idSchema, label, kind: z.literal(kind), example, ...shape });
}

const overcurrentRatings = {
  /** Rated current, A. */
  ratingAmps: quantity,
  /** Breaking capacity as stated by the maker, A. */
  breakingAmps: quantity,
  /** Rated alternating voltage, V; 0 = none stated. */
  acVolts: rating,
  /** Rated direct voltage, V; 0 = none stated. */
  dcVolts: rating,
};

export const elementSchema = z.discriminatedUnion("kind", [
  element("mains-inlet", {
    /** Has a protective-earth pin. */
    earthPin: triState,
    /** The plug or inlet cannot be put in the other way round, so line and neutral are known. */
    polarised: triState,
    /** Rating of the fuse in the plug, else of the breaker that feeds the socket, A. */
    upstreamAmps: quantity,
    /** Largest short-circuit current to be expected at the socket, A. */
    prospectiveAmps: quantity,
  }),
  element("battery", {
    chemistry: z.enum(["lead-acid", "lifepo4", "li-ion", "nimh", "unknown"]),
    cellsInSeries: z.number().int().positive().max(400).nullable(),
    stringsInParallel: z.number().int().positive().max(100).nullable(),
    capacityAh: quantity,
    /** Of the whole pack at its terminals, mΩ. */
    internalMilliohms: quantity,
    /** Largest continuous discharge current allowed by the maker, A. */
    maxDischargeAmps: quantity,
    /** Largest charging current allowed by the maker, A. */
    maxChargeAmps: quantity,
  }),
  element("dc-inlet", {
    volts: quantity,
    /** Largest current that the source behind it can give, A. */
    maxAmps: quantity,
    /** Its contacts can be touched when nothing is plugged in. */
    touchable: triState,
  }),
  element("isolated-supply", {
    insulation: insulationGrade,
    inputAmps: quantity,
    outputVolts: quantity,
    /** Current limit of the output, A. */
    outputAmps: quantity,
    /** Energy put into its output can come out of its input. */
    conductsBackwards: triState,
    /** Earth leakage stated by the maker, mA; 0 = no connection to earth. */
    leakageMilliamps: rating,
  }),
  element("transformer", {
    insulation: insulationGrade,
    secondaryVolts: quantity,
    voltAmperes: quantity,
  }),
  element("charger", {
    supply: supplyKind,
    insulation: insulationGrade,
    inputAmps: quantity,
    /** Charging voltage with the charge finished, V. */
    setPointVolts: quantity,
    outputAmps: quantity,
    conductsBackwards: triState,
    leakageMilliamps: rating,
  }),
  element("converter", {
    /** What comes out: direct voltage, or mains-like alternating voltage (an inverter). */
    output: supplyKind,
    insulation: insulationGrade,
    inputAmps: quantity,
    outputVolts: quantity,
    outputAmps: quantity,
    conductsBackwards: triState,
  }),
  element("fuse", {
    standard: z.enum([
      "iec-60127",
      "ul-248-14",
      "bs-1362",
      "blade",
      "bolt-down",
      "class-t",
      "other",
      "unknown",
    ]),
    speed: z.enum(["FF", "F", "M", "T", "TT", "other", "unknown"]),
    /** Breaking-capacity letter on the cap: L low, E enhanced, H high. */
    breakingLetter: z.enum(["L", "E", "H", "none", "unknown"]),
    ...overcurrentRatings,
  }),
  element("breaker", {
    poles: z.number().int().min(1).max(4),
    curve: z.enum(["B", "C", "D", "K", "Z", "thermal", "other", "unknown"]),
    ...overcurrentRatings,
  }),
  element("thermal-cutout", {
    temperatureC: z.number().min(-50).max(500).nullable(),
    reset: z.enum(["none", "manual", "automatic", "unknown"]),
    ratingAmps: quantity,
    acVolts: rating,
    dcVolts: rating,
  }),
  element("bms", {
    /** Cell voltage at which charging is cut, V. */
    overVoltsPerCell: quantity,
    /** Cell voltage at which discharging is cut, V. */
    underVoltsPerCell: quantity,
    /** Discharge current at which it opens, A. */
    tripAmps: quantity,
    /** Stops charging when the cells are too cold. */
    coldChargeCutoff: triState,
  }),
  element("switch", {
    /** One element is one body: its poles move together. */
    poles: z.number().int().min(1).max(4),
    throw: z.enum(["single", "changeover"]),
    actuator: z.enum(["hand", "relay", "contactor"]),
    /** What the off position promises to the person at the unit. */
    promise: z.enum(["isolation", "function", "unknown"]),
    /** For a relay: the id of the source whose presence pulls it in; `null` = not known. Not used for a hand switch. */
    coilFedBy: idSchema.nullable(),
    /** Smallest gap of an open pole, mm. */
    gapMm: quantity,
    acVolts: rating,
    acAmps: rating,
    dcVolts: rating,
    dcAmps: rating,
    /** The maker states reinforced insulation between neighbouring poles. */
    reinforcedBetweenPoles: triState,
  }),
  element("diode", {
    ratedAmps: quantity,
    reverseVolts: quantity,
    /** Forward drop at working current, V. */
    forwardVolts: quantity,
    /** Reverse leakage at 25 °C, µA. */
    leakageMicroamps: quantity,
  }),
  element("ideal-diode", {
    ratedAmps: quantity,
    maxVolts: quantity,
    /** It turns off when its output is above its input. */
    blocksReverse: triState,
  }),
  element("load", {
    supply: supplyKind,
    amps: quantity,
    heating: triState,
  }),
  element("outlet", {
    supply: supplyKind,
    /** Largest current that may be drawn, A. */
    maxAmps: quantity,
    touchable: triState,
  }),
  element("fan", { supply: supplyKind, amps: quantity }),
  element("indicator", {
    lamp: z.enum(["led", "neon", "filament", "unknown"]),
    /** What a person reads from it when it is lit. */
    meaning: z.enum([
      "mains-present",
      "dc-input-present",
      "battery-connected",
      "charging",
      "output-on",
      "other",
      "unknown",
    ]),
    amps: quantity,
  }),
  element("x-capacitor", {
    nanofarads: quantity,
    safetyClass: z.enum(["X1", "X2", "none", "unknown"]),
  }),
  element("y-capacitor", {
    nanofarads: quantity,
    safetyClass: z.enum(["Y1", "Y2", "none", "unknown"]),
  }),
  element("bleeder", { kilohms: quantity }),
  element("accessible-part", {
    /** Smallest gap through air to mains parts, mm, as measured by the builder. */
    clearanceMm: quantity,
    /** Shortest way over surfaces to mains parts, mm, as measured by the builder. */
    creepageMm: quantity,
    /** Double or reinforced insulation lies between it and every mains part. */
    reinforcedFromMains: triState,
  }),
  element("earth-terminal", {
    /** Held by its own fixing with a locked nut or the like, used for nothing else. */
    lockedFixing: triState,
  }),
]);

export type Element = z.infer<typeof elementSchema>;
export type ElementKind = Element["kind"];
export type ElementOf<Kind extends ElementKind> = Extract<Element, { kind: Kind }>;

const terminalReference = z.strictObject({ element: idSchema, terminal: z.string().min(1).max(16) });
export type TerminalReference = z.infer<typeof terminalReference>;

export const conductorSchema = z.strictObject({
  id: idSchema,
  from: terminalReference,
  to: terminalReference,
  /** Cross-section in mm² or as a gauge number; `null` = not known. */
  area: z.union([
    z.strictObject({ mm2: z.number().positive().max(1000) }),
    z.strictObject({ awg: z.number().int().min(-3).max(50) }),
    z.null(),
  ]),
  lengthM: z.number().positive().max(1000).nullable(),
  insulation: z.enum(["pvc", "rubber", "silicone", "xlpe", "none", "unknown"]),
  circuit: z.enum(["mains", "elv", "earth"]),
  /** Hottest air around it, °C; absent or `null` = not stated, and ratings are then those for 30 °C, which is said. */
  ambientC: z.number().min(-50).max(300).nullable().optional(),
});
export type Conductor = z.infer<typeof conductorSchema>;

export const energyMapSchema = z.strictObject({
  format: z.literal("mainsgate-energy-map"),
  version: z.literal(1),
  elements: z.array(elementSchema).max(200),
  conductors: z.array(conductorSchema).max(400),
});
export type EnergyMap = z.infer<typeof energyMapSchema>;

export const emptyMap: EnergyMap = {
  format: "mainsgate-energy-map",
  version: 1,
  elements: [],
  conductors: [],
};
