import type { ElementOf, EnergyMap } from "./energy-map";
import { mapOf, part, wire } from "./map-builder";

export interface StarterMap {
  key: string;
  title: string;
  description: string;
  map: EnergyMap;
}

/* Parts that several starters share. All figures are examples of our own: the builder puts the real ones in. */

const inlet: Partial<ElementOf<"mains-inlet">> = { polarised: "no", upstreamAmps: 16, prospectiveAmps: 300 };
const mainsFuse: Partial<ElementOf<"fuse">> = {
  standard: "iec-60127",
  speed: "T",
  breakingLetter: "H",
  breakingAmps: 1500,
  acVolts: 250,
  dcVolts: 0,
};
const mainsSwitch: Partial<ElementOf<"switch">> = {
  poles: 2,
  promise: "isolation",
  gapMm: 3,
  acVolts: 250,
  acAmps: 10,
  dcVolts: 0,
  dcAmps: 0,
};
const handSwitchDc: Partial<ElementOf<"switch">> = {
  poles: 1,
  promise: "function",
  gapMm: 1,
  acVolts: 250,
  acAmps: 20,
  dcVolts: 32,
  dcAmps: 20,
};
const bladeFuse: Partial<ElementOf<"fuse">> = {
  standard: "blade",
  speed: "other",
  breakingLetter: "none",
  breakingAmps: 1000,
  acVolts: 0,
  dcVolts: 32,
};

/** From the inlet through fuse and two-pole switch to a consumer: the same first rows in every starter. */
const mainsFront = (consumer: string, mm2: number) => [
  wire("W1", "X1.L", "F1.1", "mains", mm2, 0.15),
  wire("W2", "F1.2", "S1.1a", "mains", mm2, 0.15),
  wire("W3", "X1.N", "S1.2a", "mains", mm2, 0.15),
  wire("W4", "S1.1b", `${consumer}.L`, "mains", mm2, 0.2),
  wire("W5", "S1.2b", `${consumer}.N`, "mains", mm2, 0.2),
];
const bondedCase = [
  part("earth-terminal", "PE1", "Earth stud", { lockedFixing: "yes" }),
  part("accessible-part", "MP1", "Metal case", { clearanceMm: 6, creepageMm: 8, reinforcedFromMains: "no" }),
];
const earthing = [
  wire("WE1", "X1.PE", "PE1.PE", "earth", 1.5, 0.2),
  wire("WE2", "PE1.PE", "MP1.surface", "earth", 1.5, 0.1),
];

const linearBenchSupply = mapOf(
  [
    part("mains-inlet", "X1", "Appliance inlet", { ...inlet, earthPin: "yes" }),
    part("fuse", "F1", "Mains fuse", { ...mainsFuse, ratingAmps: 0.5 }),
    part("switch", "S1", "Mains switch", mainsSwitch),
    part("transformer", "T1", "Mains transformer", {
      insulation: "reinforced",
      secondaryVolts: 24,
      voltAmperes: 60,
    }),
    part("fuse", "F2", "Secondary fuse", { ...mainsFuse, ratingAmps: 3.15 }),
    part("converter", "U1", "Rectifier and regulator", {
      output: "dc",
      insulation: "none",
      inputAmps: 2.5,
      outputVolts: 24,
      outputAmps: 2,
      conductsBackwards: "no",
    }),
    part("indicator", "H1", "Output lamp", { lamp: "led", meaning: "output-on", amps: 0.005 }),
    part("outlet", "XO1", "Output terminals", { supply: "dc", maxAmps: 2, touchable: "yes" }),
    ...bondedCase,
  ],
  [
    ...mainsFront("T1", 0.75),
    wire("W6", "T1.S1", "F2.1", "elv", 1, 0.1),
    wire("W7", "F2.2", "U1.in+", "elv", 1, 0.1),
    wire("W8", "T1.S2", "U1.in-", "elv", 1, 0.2),
    wire("W9", "U1.+", "XO1.+", "elv", 1, 0.2),
    wire("W10", "U1.-", "XO1.-", "elv", 1, 0.2),
    wire("W11", "XO1.+", "H1.1", "elv", 0.5, 0.1),
    wire("W12", "XO1.-", "H1.2", "elv", 0.5, 0.1),
    ...earthing,
  ],
);

const mainsLedLamp = mapOf(
  [
    part("mains-inlet", "X1", "Two-pin plug", { ...inlet, earthPin: "no" }),
    part("fuse", "F1", "Mains fuse", { ...mainsFuse, ratingAmps: 1 }),
    part("switch", "S1", "Lamp switch", { ...mainsSwitch, acAmps: 6 }),
    part("isolated-supply", "PS1", "LED driver", {
      insulation: "reinforced",
      inputAmps: 0.15,
      outputVolts: 24,
      outputAmps: 0.7,
      conductsBackwards: "no",
      leakageMilliamps: 0,
    }),
    part("load", "LD1", "LED board", { supply: "dc", amps: 0.7, heating: "no" }),
    part("accessible-part", "MP1", "Metal lamp head", {
      clearanceMm: 8,
      creepageMm: 10,
      reinforcedFromMains: "yes",
    }),
  ],
  [
    wire("W1", "X1.L", "F1.1", "mains", 0.75, 1.8),
    wire("W2", "F1.2", "S1.1a", "mains", 0.75, 0.1),
    wire("W3", "X1.N", "S1.2a", "mains", 0.75, 1.9),
    wire("W4", "S1.1b", "PS1.L", "mains", 0.75, 0.1),
    wire("W5", "S1.2b", "PS1.N", "mains", 0.75, 0.1),
    wire("W6", "PS1.+", "LD1.+", "elv", 0.5, 0.6),
    wire("W7", "PS1.-", "LD1.-", "elv", 0.5, 0.6),
  ],
);

const batteryBackupBox = mapOf(
  [
    part("mains-inlet", "X1", "Appliance inlet", { ...inlet, earthPin: "yes" }),
    part("fuse", "F1", "Mains fuse", { ...mainsFuse, ratingAmps: 1.6 }),
    part("switch", "S1", "Mains switch", mainsSwitch),
    part("charger", "CH1", "Battery charger", {
      supply: "mains",
      insulation: "reinforced",
      inputAmps: 0.8,
      setPointVolts: 14.2,
      outputAmps: 5,
      conductsBackwards: "no",
      leakageMilliamps: 0.25,
    }),
    part("indicator", "H1", "Mains lamp", { lamp: "led", meaning: "mains-present", amps: 0.005 }),
    part("ideal-diode", "DI1", "Charger blocking stage", {
      ratedAmps: 15,
      maxVolts: 40,
      blocksReverse: "yes",
    }),
    part("battery", "BT1", "Battery", {
      chemistry: "lifepo4",
      cellsInSeries: 4,
      stringsInParallel: 1,
      capacityAh: 20,
      internalMilliohms: 32,
      maxDischargeAmps: 20,
      maxChargeAmps: 10,
    }),
    part("bms", "BM1", "Cell protection", {
      overVoltsPerCell: 3.75,
      underVoltsPerCell: 2.5,
      tripAmps: 30,
      coldChargeCutoff: "yes",
    }),
    part("fuse", "F2", "Battery fuse", { ...bladeFuse, ratingAmps: 10 }),
    part("switch", "S2", "Output switch", handSwitchDc),
    part("outlet", "XO1", "12 V output", { supply: "dc", maxAmps: 8, touchable: "no" }),
    ...bondedCase,
  ],
  [
    ...mainsFront("CH1", 0.75),
    wire("W6", "CH1.+", "DI1.in", "elv", 1.5, 0.15),
    wire("W7", "DI1.out", "S2.1a", "elv", 1.5, 0.15),
    wire("W8", "BT1.+", "BM1.B+", "elv", 2.5, 0.05, "silicone"),
    wire("W9", "BT1.-", "BM1.B-", "elv", 2.5, 0.05, "silicone"),
    wire("W10", "BM1.P+", "F2.1", "elv", 2.5, 0.05, "silicone"),
    wire("W11", "F2.2", "S2.1a", "elv", 2.5, 0.15, "silicone"),
    wire("W12", "S2.1b", "XO1.+", "elv", 2.5, 0.2),
    wire("W13", "BM1.P-", "XO1.-", "elv", 2.5, 0.3),
    wire("W14", "CH1.-", "BM1.P-", "elv", 1.5, 0.2),
    wire("W15", "CH1.+", "H1.1", "elv", 0.5, 0.2),
    wire("W16", "CH1.-", "H1.2", "elv", 0.5, 0.2),
    ...earthing,
    wire("WE3", "PE1.PE", "CH1.PE", "earth", 1, 0.15),
  ],
);

const batteryCharger = mapOf(
  [
    part("mains-inlet", "X1", "Two-pin inlet", { ...inlet, earthPin: "no" }),
    part("fuse", "F1", "Mains fuse", { ...mainsFuse, ratingAmps: 1 }),
    part("switch", "S1", "Mains switch", mainsSwitch),
    part("charger", "CH1", "Charger module", {
      supply: "mains",
      insulation: "reinforced",
      inputAmps: 0.5,
      setPointVolts: 13.8,
      outputAmps: 2,
      conductsBackwards: "no",
      leakageMilliamps: 0,
    }),
    part("indicator", "H1", "Mains lamp", { lamp: "led", meaning: "mains-present", amps: 0.005 }),
    part("diode", "D1", "Blocking diode", {
      ratedAmps: 5,
      reverseVolts: 60,
      forwardVolts: 0.5,
      leakageMicroamps: 500,
    }),
    part("fuse", "F2", "Battery fuse", { ...bladeFuse, ratingAmps: 3 }),
    part("battery", "BT1", "Battery on charge", {
      chemistry: "lead-acid",
      cellsInSeries: 6,
      stringsInParallel: 1,
      capacityAh: 7,
      internalMilliohms: 25,
      maxDischargeAmps: 20,
      maxChargeAmps: 2.1,
    }),
  ],
  [
    ...mainsFront("CH1", 0.75),
    wire("W6", "CH1.+", "D1.A", "elv", 0.75, 0.15),
    wire("W7", "D1.K", "F2.2", "elv", 0.75, 0.2),
    wire("W8", "F2.1", "BT1.+", "elv", 0.75, 0.1),
    wire("W9", "CH1.-", "BT1.-", "elv", 0.75, 0.4),
    wire("W10", "CH1.+", "H1.1", "elv", 0.5, 0.1),
    wire("W11", "CH1.-", "H1.2", "elv", 0.5, 0.1),
  ],
);

const audioAmplifier = mapOf(
  [
    part("mains-inlet", "X1", "Appliance inlet", { ...inlet, earthPin: "yes" }),
    part("fuse", "F1", "Mains fuse", { ...mainsFuse, ratingAmps: 1.6 }),
    part("switch", "S1", "Mains switch", mainsSwitch),
    part("x-capacitor", "CX1", "Suppression capacitor", { nanofarads: 220, safetyClass: "X2" }),
    part("bleeder", "R1", "Discharge resistor", { kilohms: 470 }),
    part("y-capacitor", "CY1", "Line to earth capacitor", { nanofarads: 2.2, safetyClass: "Y2" }),
    part("y-capacitor", "CY2", "Neutral to earth capacitor", { nanofarads: 2.2, safetyClass: "Y2" }),
    part("transformer", "T1", "Mains transformer", {
      insulation: "reinforced",
      secondaryVolts: 25,
      voltAmperes: 160,
    }),
    part("fuse", "F2", "Secondary fuse", { ...mainsFuse, ratingAmps: 6.3 }),
    part("converter", "U1", "Rectifier and smoothing", {
      output: "dc",
      insulation: "none",
      inputAmps: 6,
      outputVolts: 35,
      outputAmps: 4.5,
      conductsBackwards: "no",
    }),
    part("load", "LD1", "Power amplifier", { supply: "dc", amps: 4, heating: "no" }),
    part("fan", "M1", "Fan", { supply: "dc", amps: 0.2 }),
    ...bondedCase,
    part("accessible-part", "MP2", "Heat sink", {
      clearanceMm: 10,
      creepageMm: 12,
      reinforcedFromMains: "no",
    }),
  ],
  [
    ...mainsFront("T1", 0.75),
    wire("W6", "X1.L", "CX1.1", "mains", 0.75, 0.05),
    wire("W7", "X1.N", "CX1.2", "mains", 0.75, 0.05),
    wire("W8", "CX1.1", "R1.1", "mains", 0.75, 0.02),
    wire("W9", "CX1.2", "R1.2", "mains", 0.75, 0.02),
    wire("W10", "X1.L", "CY1.1", "mains", 0.75, 0.05),
    wire("W11", "X1.N", "CY2.1", "mains", 0.75, 0.05),
    wire("W12", "T1.S1", "F2.1", "elv", 2.5, 0.1),
    wire("W13", "F2.2", "U1.in+", "elv", 1.5, 0.1),
    wire("W14", "T1.S2", "U1.in-", "elv", 1.5, 0.2),
    wire("W15", "U1.+", "LD1.+", "elv", 1.5, 0.2),
    wire("W16", "U1.-", "LD1.-", "elv", 1.5, 0.2),
    wire("W17", "U1.+", "M1.+", "elv", 0.5, 0.3),
    wire("W18", "U1.-", "M1.-", "elv", 0.5, 0.3),
    ...earthing,
    wire("WE3", "PE1.PE", "MP2.surface", "earth", 1.5, 0.3),
    wire("WE4", "CY1.2", "PE1.PE", "earth", 1, 0.05),
    wire("WE5", "CY2.2", "PE1.PE", "earth", 1, 0.05),
  ],
);

const motorController = mapOf(
  [
    part("mains-inlet", "X1", "Appliance inlet", { ...inlet, earthPin: "yes" }),
    part("fuse", "F1", "Mains fuse", { ...mainsFuse, ratingAmps: 4 }),
    part("switch", "S1", "Mains switch", mainsSwitch),
    part("isolated-supply", "PS1", "24 V supply", {
      insulation: "reinforced",
      inputAmps: 2.4,
      outputVolts: 24,
      outputAmps: 10,
      conductsBackwards: "no",
      leakageMilliamps: 0.75,
    }),
    part("ideal-diode", "DI1", "Regeneration block", { ratedAmps: 20, maxVolts: 60, blocksReverse: "yes" }),
    part("fuse", "F2", "Motor fuse", { ...bladeFuse, ratingAmps: 10 }),
    part("switch", "S2", "Emergency stop", handSwitchDc),
    part("converter", "U1", "Motor bridge", {
      output: "dc",
      insulation: "none",
      inputAmps: 8,
      outputVolts: 24,
      outputAmps: 8,
      conductsBackwards: "yes",
    }),
    part("load", "LD1", "Motor", { supply: "dc", amps: 8, heating: "no" }),
    part("indicator", "H1", "Supply lamp", { lamp: "led", meaning: "mains-present", amps: 0.005 }),
    ...bondedCase,
    part("accessible-part", "MP2", "Motor body", {
      clearanceMm: 20,
      creepageMm: 20,
      reinforcedFromMains: "yes",
    }),
  ],
  [
    ...mainsFront("PS1", 1),
    wire("W6", "PS1.+", "DI1.in", "elv", 2.5, 0.15),
    wire("W7", "DI1.out", "F2.1", "elv", 2.5, 0.1),
    wire("W8", "F2.2", "S2.1a", "elv", 2.5, 0.3),
    wire("W9", "S2.1b", "U1.in+", "elv", 2.5, 0.3),
    wire("W10", "PS1.-", "U1.in-", "elv", 2.5, 0.4),
    wire("W11", "U1.+", "LD1.+", "elv", 2.5, 1),
    wire("W12", "U1.-", "LD1.-", "elv", 2.5, 1),
    wire("W13", "PS1.+", "H1.1", "elv", 1.5, 0.2),
    wire("W14", "PS1.-", "H1.2", "elv", 1.5, 0.2),
    ...earthing,
    wire("WE3", "PE1.PE", "PS1.PE", "earth", 1.5, 0.15),
  ],
);

/** Whole and sound maps to begin from. The figures in them are examples; nothing in them describes a real unit. */
export const starterMaps: StarterMap[] = [
  {
    key: "linear-bench-supply",
    title: "Linear bench supply",
    description: "Transformer, rectifier and regulator in an earthed metal case, with output terminals.",
    map: linearBenchSupply,
  },
  {
    key: "mains-led-lamp",
    title: "Mains LED lamp",
    description: "Double-insulated lamp with a driver, a two-pole switch and a metal head.",
    map: mainsLedLamp,
  },
  {
    key: "battery-backup-box",
    title: "Battery back-up box",
    description:
      "Charger, lithium iron phosphate battery with protection, and a 12 V output that stays on when mains fails.",
    map: batteryBackupBox,
  },
  {
    key: "battery-charger",
    title: "Battery charger",
    description: "Double-insulated charger for a 12 V lead-acid block, with blocking diode and battery fuse.",
    map: batteryCharger,
  },
  {
    key: "audio-amplifier",
    title: "Audio amplifier",
    description: "Earthed amplifier with transformer, mains suppression and fan.",
    map: audioAmplifier,
  },
  {
    key: "motor-controller",
    title: "Motor controller",
    description:
      "24 V supply, emergency stop and a bridge that can brake; a blocking stage keeps braking energy from the supply.",
    map: motorController,
  },
];
