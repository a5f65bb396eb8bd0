import { analyseBatteries } from "../battery-analysis";
import type { BenchCheck, CheckDefinition } from "../bench-check";
import {
  answer,
  because,
  caution,
  examination,
  keyOf,
  practice,
  whileWorking,
  worksOnMains,
} from "../check-parts";
import { circuitOf } from "../circuit";
import { cellLimits } from "../supply-data";

/** Charging limits, protection, fixing and, at each charger's output, the voltage without a battery's help. */
export const battery: CheckDefinition = {
  id: "battery",
  family: "battery",
  derive(view) {
    const reports = analyseBatteries(circuitOf(view));
    return view.ofKind("battery").flatMap((element): BenchCheck[] => {
      const report = reports.find((each) => each.battery === element.id);
      if (report === undefined) return [];
      const chargers = report.chargedBy.filter((id) => view.elements.get(id)?.kind === "charger");
      const limits = element.chemistry === "unknown" ? null : cellLimits[element.chemistry];
      const cold = view.ofKind("bms").every(({ coldChargeCutoff }) => coldChargeCutoff !== "yes");
      const lithium = element.chemistry === "lifepo4" || element.chemistry === "li-ion";
      const strings = element.stringsInParallel ?? 1;
      const state: BenchCheck = {
        key: keyOf("battery-state", element.id),
        family: "battery",
        title: `${view.name(element.id)}: limits, protection and fixing`,
        why: [
          because("A battery that is charged too high, shorted or crushed burns, and its gas is poisonous.", [
            element.id,
            ...report.chargedBy,
          ]),
        ],
        method: [
          "Read chemistry, cells, capacity and maker's limits on the pack and compare them with the map.",
          "Look for swelling, leaks, heat marks, dents; poles covered, pack fixed, nothing sharp beside it, cables free of edges.",
          ...(lithium && cold
            ? ["Nothing on the map stops charging below 0 °C: the conditions of use must."]
            : []),
        ],
        cautions: [caution.battery],
        computed: answer(
          report.verdict,
          report.findings.map(({ text, elements }) => because(text, elements)),
        ),
        asks: examination(
          strings > 1
            ? `Is the pack the one on the map, sound, covered and fixed, and are its ${strings} strings joined cell by cell or each with its own current limit?`
            : "Is the pack the one on the map, sound, covered and fixed?",
          "As on the map and sound",
          strings > 1
            ? "Another pack, damaged, loose, or strings without a limit"
            : "Another pack, damaged, or loose",
        ),
        photo: "required",
        citations: [limits?.citation ?? practice("battery limits")],
        subjects: {
          elements: [
            ...new Set([
              element.id,
              ...report.chargedBy,
              ...report.findings.flatMap(({ elements }) => elements),
            ]),
          ],
          conductors: [],
        },
      };
      const fullVolts = report.fullVolts;
      const voltages =
        fullVolts === null
          ? []
          : chargers.map((charger): BenchCheck => ({
              key: keyOf("charge-voltage", element.id, charger),
              family: "battery",
              title: `Charging voltage of ${view.name(charger)}`,
              why: [
                because(
                  `${view.name(charger)} must stop by itself: the protection board's trip is no charging limit.`,
                  [charger, element.id],
                ),
              ],
              method: [
                `Disconnect ${view.name(element.id)} from the charger's output, without shorting it.`,
                "Measure the output open: without load the drop of a blocking diode is gone, so this is the highest that the pack would float to.",
                "A charger that waits for a battery shows nothing: then measure across the battery with the charge finished, and say so under the conditions.",
              ],
              cautions: whileWorking(view),
              energised: worksOnMains(view),
              computed: null,
              asks: {
                kind: "reading",
                quantity: "Open output voltage",
                unit: "V",
                limit: {
                  kind: "between",
                  lower: Number(
                    (fullVolts * (limits === null ? 0.8 : limits.nominal / limits.full)).toPrecision(4),
                  ),
                  upper: Number(fullVolts.toPrecision(6)),
                  unit: "V",
                  citation: limits?.citation ?? practice("battery limits"),
                },
                instrument: { kind: "multimeter", range: "direct, 0 to 100 V" },
                conditions: [
                  "Battery disconnected",
                  "After the reading stands still",
                  "Below the nominal voltage the charger does not charge",
                ],
              },
              photo: "none",
              citations: [limits?.citation ?? practice("battery limits")],
              subjects: { elements: [charger, element.id], conductors: [] },
            }));
      return [state, ...voltages];
    });
  },
};
