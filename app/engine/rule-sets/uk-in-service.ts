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
  standard: "IET Code of Practice for In-service Inspection and Testing of Electrical Equipment",
  clause,
  edition: "4th edition",
  mark,
  ...(note === undefined ? {} : { note }),
});
const value = (amount: number, unit: string, citation: Citation): RuleValue => ({
  value: amount,
  unit,
  citation,
});

const weak = "Seen in a secondary page only.";
const insulation = cite("insulation resistance", "V", weak);
const heating = cite(
  "protective conductor current, class I heating",
  "V",
  `${weak} Taken for every heating appliance: stricter than 3.5 mA below 4.7 kW.`,
);
const notDoubled = `${weak} The code doubles it where there is no control device or an all-pole 3 mm gap; that is not used here, which is stricter.`;

/** In-service inspection and testing as practised in the United Kingdom. */
export const ukInService: RuleSet = {
  key: "uk-in-service",
  version: "1",
  title: "UK in-service inspection and testing (code of practice, 4th edition)",
  region: "United Kingdom",
  notes: [
    "Values of the 4th edition. The 5th edition (2020) relaxes some of them.",
    "Check every value against your own copy of the code before you rely on it.",
  ],
  values: {
    protectiveEarth: {
      kind: "above-cord",
      allowance: value(0.1, "Ω", cite("earth continuity", "V", weak)),
    },
    protectiveEarthTestAmps: value(
      0.2,
      "A",
      cite("earth continuity", "V", "20 to 200 mA, or 1.5 times the fuse up to 25 A for 5 to 20 s."),
    ),
    insulationTestVolts: value(500, "V", insulation),
    insulationReducedTestVolts: value(
      250,
      "V",
      cite("insulation resistance", "V", "For sensitive equipment."),
    ),
    insulationClassI: value(1.0, "MΩ", insulation),
    insulationClassIHeating: value(
      1.0,
      "MΩ",
      cite(
        "insulation resistance",
        "V",
        "The code has 0.3 MΩ for some heating appliances. Sources disagree whether it is for 3 kW and above or below, so the ordinary class I value is used here.",
      ),
    ),
    insulationClassII: value(2.0, "MΩ", insulation),
    insulationMainsToElv: value(
      2.0,
      "MΩ",
      cite("insulation resistance", "M", "The code gives no own value; its class II value is used."),
    ),
    protectiveConductorCurrent: value(3.5, "mA", cite("protective conductor current", "V", notDoubled)),
    protectiveConductorCurrentHandheld: value(
      0.75,
      "mA",
      cite("protective conductor current, hand-held class I", "V", notDoubled),
    ),
    protectiveConductorCurrentHeating: {
      kind: "per-kilowatt",
      above: value(0, "kW", heating),
      perKilowatt: value(0.75, "mA/kW", heating),
      least: value(0.75, "mA", heating),
      cap: value(5, "mA", heating),
    },
    touchCurrent: value(0.25, "mA", cite("touch current, class II", "V", notDoubled)),
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
