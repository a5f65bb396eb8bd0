import type { EnergyMap } from "./energy-map";
import { extended, mapOf, part, withData, without, wire } from "./map-builder";
import { starterMaps } from "./starter-maps";

/** Invented units for the demo workshop and the tests, each with one thing to be found, beside ones that are right. */

function starter(key: string): EnergyMap {
  const found = starterMaps.find((each) => each.key === key);
  if (found === undefined) throw new Error(`There is no starter map ${key}.`);
  return found.map;
}

const backup = starter("battery-backup-box");

/** One two-pole rocker: pole 1 breaks the line, pole 2 the battery's plus. The neutral stays joined. */
const backupSinglePole = extended(
  without(
    withData(backup, "S1", { poles: 2, reinforcedBetweenPoles: "no", dcVolts: 30, dcAmps: 10 }),
    "S2",
    "W3",
    "W5",
    "W7",
    "W11",
    "W12",
  ),
  [],
  [
    wire("W3", "X1.N", "CH1.N", "mains", 0.75, 0.35),
    wire("W7", "DI1.out", "XO1.+", "elv", 1.5, 0.15),
    wire("W11", "F2.2", "S1.2a", "elv", 2.5, 0.15, "silicone"),
    wire("W12", "S1.2b", "XO1.+", "elv", 2.5, 0.2),
  ],
);

/** The "mains" lamp sits behind the blocking stage, so the battery lights it. */
const indicatorBackfed = extended(
  without(backup, "W15", "W16"),
  [],
  [wire("W15", "S2.1a", "H1.1", "elv", 1.5, 0.2), wire("W16", "CH1.-", "H1.2", "elv", 1.5, 0.2)],
);

/** A 10 A fuse before wire for 3 A. */
const oversizedFuse: EnergyMap = {
  ...withData(starter("mains-led-lamp"), "F1", { ratingAmps: 10 }),
  conductors: starter("mains-led-lamp").conductors.map((each) =>
    each.circuit === "mains" ? { ...each, area: { mm2: 0.5 } } : each,
  ),
};

/** The lamp's switch has one pole and sits in the neutral. */
const neutralSwitched = extended(
  without(withData(starter("mains-led-lamp"), "S1", { poles: 1 }), "W2", "W3", "W4", "W5"),
  [],
  [
    wire("W2", "F1.2", "PS1.L", "mains", 0.75, 0.2),
    wire("W3", "X1.N", "S1.1a", "mains", 0.75, 1.9),
    wire("W4", "S1.1b", "PS1.N", "mains", 0.75, 0.1),
  ],
);

/** Only the charger's side has a fuse: a short on the bus is fed by the battery through nothing. */
const batteryUnfused = extended(
  without(backup, "F2", "W7"),
  [
    part("fuse", "F2", "Charger fuse", {
      standard: "blade",
      speed: "other",
      breakingLetter: "none",
      breakingAmps: 1000,
      acVolts: 0,
      dcVolts: 32,
      ratingAmps: 7.5,
    }),
  ],
  [
    wire("W6A", "DI1.out", "F2.1", "elv", 1.5, 0.1),
    wire("W6B", "F2.2", "S2.1a", "elv", 1.5, 0.1),
    wire("W10", "BM1.P+", "S2.1a", "elv", 2.5, 0.3, "silicone"),
  ],
);

/** A bicycle-light station whose step-down module may or may not conduct backwards into its input socket. */
const converterUnknown = mapOf(
  [
    part("dc-inlet", "J1", "Adapter socket", { volts: 19, maxAmps: 3, touchable: "yes" }),
    part("fuse", "F1", "Input fuse", {
      standard: "iec-60127",
      speed: "T",
      breakingLetter: "L",
      breakingAmps: 35,
      acVolts: 250,
      dcVolts: 32,
      ratingAmps: 3.15,
    }),
    part("charger", "CH1", "Step-down charging module", {
      supply: "dc",
      insulation: "none",
      inputAmps: 2,
      setPointVolts: 12.6,
      outputAmps: 2,
      conductsBackwards: "unknown",
      leakageMilliamps: 0,
    }),
    part("indicator", "H1", "Adapter lamp", { lamp: "led", meaning: "dc-input-present", amps: 0.007 }),
    part("fuse", "F2", "Battery fuse", {
      standard: "blade",
      speed: "other",
      breakingLetter: "none",
      breakingAmps: 1000,
      acVolts: 0,
      dcVolts: 32,
      ratingAmps: 5,
    }),
    part("battery", "BT1", "Battery", {
      chemistry: "li-ion",
      cellsInSeries: 3,
      stringsInParallel: 2,
      capacityAh: 5,
      internalMilliohms: 60,
      maxDischargeAmps: 10,
      maxChargeAmps: 2.5,
    }),
    part("bms", "BM1", "Cell protection", {
      overVoltsPerCell: 4.25,
      underVoltsPerCell: 2.7,
      tripAmps: 15,
      coldChargeCutoff: "unknown",
    }),
    part("switch", "S1", "Light switch", {
      poles: 1,
      promise: "function",
      gapMm: 1,
      acVolts: 250,
      acAmps: 6,
      dcVolts: 30,
      dcAmps: 6,
    }),
    part("load", "LD1", "Light", { supply: "dc", amps: 2, heating: "no" }),
  ],
  [
    wire("W1", "J1.+", "F1.1", "elv", 0.75, 0.1),
    wire("W2", "F1.2", "CH1.in+", "elv", 0.75, 0.1),
    wire("W3", "J1.-", "CH1.in-", "elv", 0.75, 0.2),
    wire("W4", "F1.2", "H1.1", "elv", 0.5, 0.1),
    wire("W5", "J1.-", "H1.2", "elv", 0.5, 0.1),
    wire("W6", "CH1.+", "F2.2", "elv", 1, 0.1),
    wire("W7", "F2.1", "BM1.P+", "elv", 1, 0.05),
    wire("W8", "BM1.B+", "BT1.+", "elv", 1, 0.05),
    wire("W9", "BM1.B-", "BT1.-", "elv", 1, 0.05),
    wire("W10", "CH1.-", "BM1.P-", "elv", 1, 0.2),
    wire("W11", "F2.2", "S1.1a", "elv", 1, 0.2),
    wire("W12", "S1.1b", "LD1.+", "elv", 1, 0.5),
    wire("W13", "LD1.-", "BM1.P-", "elv", 1, 0.5),
  ],
);

/** The protective conductor runs through a fuse on its way to the case. */
const earthFused = extended(
  without(starter("linear-bench-supply"), "WE2"),
  [
    part("fuse", "F3", "Fuse in the earth lead", {
      standard: "iec-60127",
      speed: "T",
      breakingLetter: "H",
      breakingAmps: 1500,
      acVolts: 250,
      dcVolts: 0,
      ratingAmps: 6.3,
    }),
  ],
  [wire("WE2", "PE1.PE", "F3.1", "earth", 1.5, 0.1), wire("WE3", "F3.2", "MP1.surface", "earth", 1.5, 0.1)],
);

/** An inverter feeds the outlet from the battery; one relay changes over between mains and inverter. */
const inverterStation = mapOf(
  [
    part("mains-inlet", "X1", "Appliance inlet", {
      earthPin: "yes",
      polarised: "no",
      upstreamAmps: 16,
      prospectiveAmps: 300,
    }),
    part("fuse", "F1", "Mains fuse", {
      standard: "iec-60127",
      speed: "T",
      breakingLetter: "H",
      breakingAmps: 1500,
      acVolts: 250,
      dcVolts: 0,
      ratingAmps: 2,
    }),
    part("switch", "S1", "Mains switch", {
      poles: 2,
      promise: "isolation",
      gapMm: 3,
      acVolts: 250,
      acAmps: 10,
      dcVolts: 0,
      dcAmps: 0,
    }),
    part("switch", "K1", "Transfer relay", {
      poles: 2,
      throw: "changeover",
      actuator: "relay",
      promise: "function",
      coilFedBy: "X1",
      gapMm: 0.5,
      acVolts: 250,
      acAmps: 8,
      dcVolts: 30,
      dcAmps: 8,
    }),
    part("battery", "BT1", "Battery", {
      chemistry: "lead-acid",
      cellsInSeries: 12,
      stringsInParallel: 1,
      capacityAh: 18,
      internalMilliohms: 40,
      maxDischargeAmps: 40,
      maxChargeAmps: 5,
    }),
    part("fuse", "F2", "Battery fuse", {
      standard: "blade",
      speed: "other",
      breakingLetter: "none",
      breakingAmps: 1000,
      acVolts: 0,
      dcVolts: 32,
      ratingAmps: 20,
    }),
    part("converter", "U1", "Inverter", {
      output: "mains",
      insulation: "reinforced",
      inputAmps: 15,
      outputVolts: 230,
      outputAmps: 1.3,
      conductsBackwards: "no",
    }),
    part("outlet", "XO1", "Mains outlet", { supply: "mains", maxAmps: 1.3, touchable: "no" }),
    part("earth-terminal", "PE1", "Earth stud", { lockedFixing: "yes" }),
    part("accessible-part", "MP1", "Metal case", {
      clearanceMm: 6,
      creepageMm: 8,
      reinforcedFromMains: "no",
    }),
  ],
  [
    wire("W1", "X1.L", "F1.1", "mains", 0.75, 0.15),
    wire("W2", "F1.2", "S1.1a", "mains", 0.75, 0.15),
    wire("W3", "X1.N", "S1.2a", "mains", 0.75, 0.15),
    wire("W4", "S1.1b", "K1.1a", "mains", 0.75, 0.2),
    wire("W5", "S1.2b", "K1.2a", "mains", 0.75, 0.2),
    wire("W6", "K1.1c", "XO1.L", "mains", 0.75, 0.2),
    wire("W7", "K1.2c", "XO1.N", "mains", 0.75, 0.2),
    wire("W8", "U1.L", "K1.1b", "mains", 0.75, 0.2),
    wire("W9", "U1.N", "K1.2b", "mains", 0.75, 0.2),
    wire("W10", "BT1.+", "F2.1", "elv", 4, 0.15),
    wire("W11", "F2.2", "U1.in+", "elv", 4, 0.3),
    wire("W12", "BT1.-", "U1.in-", "elv", 4, 0.4),
    wire("WE1", "X1.PE", "PE1.PE", "earth", 1.5, 0.2),
    wire("WE2", "PE1.PE", "MP1.surface", "earth", 1.5, 0.1),
    wire("WE3", "PE1.PE", "XO1.PE", "earth", 1.5, 0.2),
  ],
);

export const demoMaps = {
  /** Right: the back-up box with its own switch for each circuit. */
  sound: backup,
  /** Right: the double-insulated lamp. */
  soundLamp: starter("mains-led-lamp"),
  backupSinglePole,
  indicatorBackfed,
  oversizedFuse,
  neutralSwitched,
  batteryUnfused,
  converterUnknown,
  earthFused,
  inverterStation,
};
