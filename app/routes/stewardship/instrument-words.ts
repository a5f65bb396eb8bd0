import type { InstrumentKind } from "~/engine/bench-check";
import type { BadgeTone } from "~/components/ui/badge";
import type { CalibrationState } from "~/workflow/calibration";

export const instrumentKindTitles: Record<InstrumentKind, string> = {
  "low-ohm-meter": "Low-resistance meter",
  "insulation-tester": "Insulation tester",
  "leakage-meter": "Leakage current meter",
  multimeter: "Multimeter",
  "clamp-meter": "Clamp meter",
  oscilloscope: "Oscilloscope",
  caliper: "Caliper",
  thermometer: "Thermometer",
};

export const calibrationWords: Record<CalibrationState, { word: string; tone: BadgeTone }> = {
  "in-calibration": { word: "In calibration", tone: "pass" },
  "due-soon": { word: "Due soon", tone: "undecided" },
  overdue: { word: "Out of calibration", tone: "fail" },
  "not-yet": { word: "Not calibrated yet", tone: "fail" },
  retired: { word: "Retired", tone: "idle" },
};
