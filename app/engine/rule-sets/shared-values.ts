import type { RuleValue } from "../rule-set";

/**
 * Values that neither test code gives itself and that both of our rule sets take from the same product and
 * insulation standards. They are named once here and listed in each rule set that uses them.
 */

/** Gap of every pole for full disconnection of a 230 V supply. */
export const fullDisconnectionGap: RuleValue = {
  value: 3,
  unit: "mm",
  citation: {
    standard: "IEC 61058-1",
    clause: "full disconnection",
    edition: "not checked",
    mark: "V",
    note: "A public guide to the UK code gives 3 mm for each pole.",
  },
};

export const residualVolts: RuleValue = {
  value: 34,
  unit: "V",
  citation: {
    standard: "IEC 60335-1",
    clause: "22.5",
    edition: "not checked",
    mark: "V",
    note: "A weak page; clause number from memory. Peak value, 1 s after unplugging.",
  },
};

export const residualSeconds: RuleValue = {
  value: 1,
  unit: "s",
  citation: {
    standard: "IEC 60335-1",
    clause: "22.5",
    edition: "not checked",
    mark: "V",
    note: "Clause number from memory.",
  },
};

export const residualExemptNanofarads: RuleValue = {
  value: 100,
  unit: "nF",
  citation: { standard: "IEC 60335-1", clause: "22.5", edition: "not checked", mark: "M" },
};

export const backfeedSeconds: RuleValue = {
  value: 1,
  unit: "s",
  citation: {
    standard: "IEC 62040-1",
    clause: "backfeed protection, pluggable type A",
    edition: "not checked",
    mark: "V",
  },
};

export const backfeedAcVolts: RuleValue = {
  value: 30,
  unit: "V",
  citation: {
    standard: "IEC 62040-1",
    clause: "backfeed protection",
    edition: "not checked",
    mark: "V",
    note: "rms; 42.4 V peak.",
  },
};

export const backfeedDcVolts: RuleValue = {
  value: 60,
  unit: "V",
  citation: { standard: "IEC 62040-1", clause: "backfeed protection", edition: "not checked", mark: "V" },
};

export const pollutionDegree: RuleValue = {
  value: 2,
  unit: "degree",
  citation: {
    standard: "IEC 60664-1",
    clause: "pollution degrees",
    edition: "not checked",
    mark: "M",
    note: "Assumed: dry indoor use with only occasional condensation. Dusty or damp places need degree 3.",
  },
};

export const altitude: RuleValue = {
  value: 2000,
  unit: "m",
  citation: {
    standard: "IEC 60664-1",
    clause: "Table F.2",
    edition: "not checked",
    mark: "M",
    note: "The clearances hold up to this height; above it the altitude factor applies.",
  },
};
