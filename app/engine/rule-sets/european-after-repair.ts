import type { Citation, RuleSet, RuleValue } from "../rule-set";
import {
  altitude,
  backfeedAcVolts,
  backfeedDcVolts,
  backfeedSeconds,
  fullDisconnectionGap,
  pollutionDegree,
  residualExemptNanofarads,
  residualSeconds,
  residualVolts,
} from "./shared-values";

const cite = (clause: string, mark: Citation["mark"], note?: string): Citation => ({
  standard: "EN 50678 / EN 50699",
  clause,
  edition: "2020/2021 (edition from memory)",
  mark,
  ...(note === undefined ? {} : { note }),
});
const value = (amount: number, unit: string, citation: Citation): RuleValue => ({
  value: amount,
  unit,
  citation,
});

const earth = cite(
  "protective conductor resistance",
  "V",
  "Seen for the standard's predecessor; up to 16 A and 1.5 mm².",
);
const heating = cite("protective conductor current, heating above 3.5 kW", "V");
const insulation = cite("insulation resistance", "M");

/** Test after repair and recurrent test of electrical equipment, as used in Europe. */
export const europeanAfterRepair: RuleSet = {
  key: "eu-after-repair",
  version: "1",
  title: "European test after repair and recurrent test (EN 50678, EN 50699)",
  region: "Europe",
  notes: [
    "For equipment up to 16 A and cords up to 1.5 mm².",
    "Check every value against your own copy of the standards before you rely on it.",
  ],
  values: {
    protectiveEarth: {
      kind: "stepped",
      base: value(0.3, "Ω", earth),
      baseLength: value(5, "m", earth),
      step: value(0.1, "Ω", earth),
      stepLength: value(7.5, "m", earth),
      cap: value(1.0, "Ω", earth),
      largestArea: value(1.5, "mm²", earth),
      floor: value(
        0.1,
        "Ω",
        cite(
          "protective conductor resistance, larger cords",
          "V",
          "The cord's computed resistance, but never below this.",
        ),
      ),
    },
    protectiveEarthTestAmps: value(0.2, "A", {
      standard: "IEC 61557-4",
      clause: "measuring current",
      edition: "not checked",
      mark: "M",
    }),
    insulationTestVolts: value(500, "V", cite("insulation resistance", "V")),
    insulationReducedTestVolts: value(
      250,
      "V",
      cite("insulation resistance", "V", "Only with built-in suppressors."),
    ),
    insulationClassI: value(1.0, "MΩ", insulation),
    insulationClassIHeating: value(
      0.3,
      "MΩ",
      cite("insulation resistance, class I with heating elements", "M", "Elements switched on for the test."),
    ),
    insulationClassII: value(2.0, "MΩ", insulation),
    insulationMainsToElv: value(2.0, "MΩ", insulation),
    protectiveConductorCurrent: value(3.5, "mA", cite("protective conductor current", "V")),
    protectiveConductorCurrentHandheld: value(3.5, "mA", cite("protective conductor current", "V")),
    protectiveConductorCurrentHeating: {
      kind: "per-kilowatt",
      above: value(3.5, "kW", heating),
      perKilowatt: value(1, "mA/kW", heating),
      least: value(3.5, "mA", heating),
      cap: value(10, "mA", heating),
    },
    touchCurrent: value(0.5, "mA", cite("touch current", "V")),
    contactGap: fullDisconnectionGap,
    residualVolts,
    residualSeconds,
    residualExemptNanofarads,
    backfeedSeconds,
    backfeedAcVolts,
    backfeedDcVolts,
    pollutionDegree,
    altitude,
  },
};
