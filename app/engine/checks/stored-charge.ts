import type { Verdict3 } from "../analysis";
import type { BenchCheck, CheckDefinition, Reason } from "../bench-check";
import { answer, because, caution, keyOf, worstVerdict } from "../check-parts";
import { circuitOf } from "../circuit";
import { figure } from "../figure";
import { chargesComplete, largestBleeder, pinCharges, settingText, type PinCharge } from "../stored-charge";
import type { MapView } from "../map-view";
import type { RuleSet } from "../rule-set";
import type { UnitFacts } from "../unit-facts";

const scopeClip =
  "An earthed oscilloscope's probe clip is earth: on a pin it joins line with earth. Use a differential probe or an isolated instrument, never a common probe, and never lift the instrument's own earth.";

/** What the pins of a plug just pulled still hold. */
export const storedCharge: CheckDefinition = {
  id: "stored-charge",
  family: "stored-charge",
  derive(view, ruleSet, facts) {
    const { residualVolts, residualSeconds } = ruleSet.values;
    const circuit = circuitOf(view);
    return view.ofKind("mains-inlet").map((inlet): BenchCheck => {
      const charges = pinCharges(circuit, inlet, facts.supplyVolts, residualSeconds.value).filter(
        ({ capacitors }) => capacitors.length > 0,
      );
      const judged = charges.map((charge) => judge(view, ruleSet, facts, inlet.id, charge));
      if (!chargesComplete(circuit, inlet)) judged.push(tooMany(inlet.id));
      const parts = [...new Set(charges.flatMap(({ capacitors, bleeders }) => [...capacitors, ...bleeders]))];
      return {
        key: keyOf("residual-voltage", inlet.id),
        family: "stored-charge",
        title: `Voltage left at the plug of ${view.name(inlet.id)}`,
        why: [
          because(
            parts.length > 0
              ? `${parts.map((id) => view.name(id)).join(", ")} on the mains side hold charge after the plug is pulled.`
              : "Supplies have capacitors at their inputs that are not on the map.",
            [inlet.id, ...parts],
          ),
        ],
        method: [
          "Put the plug into a shrouded test socket that a switch parts from mains on both poles, and join the instrument there with a differential probe or an isolated input.",
          `Open that switch, which is pulling the plug, and read the highest voltage between its pins after ${figure(residualSeconds.value)} s.`,
          "Repeat ten times in each combination of the switches' positions, since it depends on the moment of pulling. Take the highest.",
        ],
        cautions: [
          caution.charge,
          scopeClip,
          caution.shrouded,
          "Until the test socket is parted from mains, all of it is live: behind a residual-current device, with one hand.",
        ],
        energised: true,
        computed:
          judged.length === 0
            ? null
            : answer(
                worstVerdict(judged.map(({ verdict }) => verdict)),
                judged.map(({ reason }) => reason),
              ),
        asks: {
          kind: "reading",
          quantity: `Voltage ${figure(residualSeconds.value)} s after unplugging`,
          unit: "V",
          limit: { kind: "at-most", value: residualVolts.value, unit: "V", citation: residualVolts.citation },
          instrument: {
            kind: "oscilloscope",
            range: "differential probe or isolated input of at least 100 MΩ, 600 V peak",
          },
          conditions: ["Peak value", "Highest of ten pulls in every combination of the switches"],
        },
        photo: "none",
        citations: [residualVolts.citation, residualSeconds.citation],
        subjects: { elements: [inlet.id, ...parts], conductors: [] },
      };
    });
  },
};

const tooMany = (inlet: string): { verdict: Verdict3; reason: Reason } => ({
  verdict: "unknown",
  reason: because(
    "There are more switches at the pins than all combinations can be worked out for; what they hold in the others is not known.",
    [inlet],
  ),
});

function judge(
  view: MapView,
  ruleSet: RuleSet,
  facts: UnitFacts,
  inlet: string,
  charge: PinCharge,
): { verdict: Verdict3; reason: Reason } {
  const { residualVolts, residualSeconds, residualExemptNanofarads } = ruleSet.values;
  const { capacitors, bleeders, nanofarads, volts } = charge;
  const elements = [inlet, ...capacitors, ...bleeders];
  const where = settingText(charge);
  if (nanofarads !== null && nanofarads <= residualExemptNanofarads.value) {
    return {
      verdict: "pass",
      reason: because(
        `${figure(nanofarads)} nF at the pins ${where} is exempt up to ${figure(residualExemptNanofarads.value)} nF.`,
        elements,
      ),
    };
  }
  if (volts === null || nanofarads === null) {
    return {
      verdict: "unknown",
      reason: because(
        `What the pins hold ${where} is not known: ${capacitors.map((id) => view.name(id)).join(", ")} or its bleeder has no value.`,
        elements,
      ),
    };
  }
  const bleeder = largestBleeder(facts.supplyVolts, nanofarads, residualVolts.value, residualSeconds.value);
  const enough = volts <= residualVolts.value;
  const advice =
    enough || !Number.isFinite(bleeder) || bleeder <= 0
      ? ""
      : ` A bleeder of at most ${figure(bleeder)} kΩ before the switch would do.`;
  return {
    verdict: enough ? "pass" : "fail",
    reason: because(
      `${figure(nanofarads)} nF at the pins ${where}, ${bleeders.length === 0 ? "no bleeder" : bleeders.map((id) => view.name(id)).join(", ")}: ${figure(volts)} V after ${figure(residualSeconds.value)} s.${advice}`,
      elements,
    ),
  };
}
