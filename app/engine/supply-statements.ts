import type { Statement, StatementLevel, Verdict3 } from "./analysis";
import { analyseBatteries } from "./battery-analysis";
import type { Circuit } from "./circuit";
import { figure } from "./figure";
import { hasMains } from "./insulation";
import { judgeLeakage, leakageLimit, leakageSum } from "./leakage";
import type { RuleSet } from "./rule-set";
import { fromReason, levelOf, say, type Results } from "./statement-parts";
import { chargesComplete, pinCharges, settingText } from "./stored-charge";
import type { UnitFacts } from "./unit-facts";

export function fusingStatements({ view }: Circuit, { fusing }: Results): Statement[] {
  const conductors = fusing.conductors
    .filter(({ verdict }) => verdict !== "pass")
    .map(({ conductor, source, verdict, text, limitedBy }) =>
      say(
        "fusing",
        `conductor ${conductor} ${source}`,
        levelOf(verdict),
        text,
        [source, ...limitedBy],
        [conductor],
      ),
    );
  const devices = fusing.devices.map((report) => {
    const verdicts = [
      report.loadVerdict,
      report.breakingVerdict,
      report.voltageVerdict,
      report.placementVerdict,
    ];
    const verdict: Verdict3 = verdicts.includes("fail")
      ? "fail"
      : verdicts.includes("unknown")
        ? "unknown"
        : "pass";
    const proposal = proposalText(report.proposedAmps, report.largestAmps);
    const needsOne =
      conductors.some(({ elements }) => elements.includes(report.device)) || report.loadVerdict === "fail";
    return say(
      "fusing",
      `device ${report.device} ${report.source}`,
      levelOf(verdict),
      `${report.texts.join(" ")}${needsOne ? proposal : ""}`,
      [report.device, report.source],
    );
  });
  const guarded = new Set(fusing.conductors.map(({ source }) => source));
  const whole = [...guarded]
    .filter((source) => fusing.conductors.every((each) => each.source !== source || each.verdict === "pass"))
    .map((source) =>
      say(
        "fusing",
        `all ${source}`,
        "good",
        `Every conductor that ${view.name(source)} feeds is protected.`,
        [source],
      ),
    );
  return [...conductors, ...devices, ...whole];
}

function proposalText(next: number | null, largest: number | null): string {
  if (next === null) return " No standard rating suits both the load and the conductors.";
  const upTo = largest !== null && largest > next ? ` up to ${figure(largest)} A` : "";
  return ` A rating from ${figure(next)} A${upTo} would suit load and conductors.`;
}

/** Parts by themselves: a touched voltage is a danger, a rating that does not suit a defect. */
export function partStatements({ parts }: Results): Statement[] {
  return parts.map(({ kind, element, verdict, text, elements, conductors }, index) =>
    say(
      kind === "touch" ? "insulation" : "fusing",
      `part ${kind} ${element} ${index}`,
      levelOf(verdict, kind === "touch" ? "danger" : "defect"),
      text,
      elements,
      conductors,
    ),
  );
}

export function insulationStatements({ insulation }: Results): Statement[] {
  return insulation.barriers.map(({ id, verdict, text, elements }) =>
    say("insulation", id, levelOf(verdict), text, elements),
  );
}

export function leakageStatements(circuit: Circuit, ruleSet: RuleSet, facts: UnitFacts): Statement[] {
  const sum = leakageSum(circuit, facts);
  if (!hasMains(circuit) || sum.parts.length === 0) return [];
  const limit = leakageLimit(circuit, ruleSet, facts);
  const amount = `${sum.complete ? "" : "at least "}${figure(sum.milliamps)} mA`;
  return [
    say(
      "leakage",
      "sum",
      levelOf(judgeLeakage(sum, limit)),
      `Capacitors and supplies leak ${amount} to earth at most; the limit is ${figure(limit.milliamps)} mA.`,
      sum.parts.flatMap(({ elements }) => elements),
    ),
  ];
}

export function chargeStatements(circuit: Circuit, ruleSet: RuleSet, facts: UnitFacts): Statement[] {
  const { residualVolts, residualSeconds, residualExemptNanofarads } = ruleSet.values;
  return circuit.view.ofKind("mains-inlet").flatMap((inlet) => {
    const charges = pinCharges(circuit, inlet, facts.supplyVolts, residualSeconds.value).filter(
      ({ capacitors }) => capacitors.length > 0,
    );
    const open = chargesComplete(circuit, inlet)
      ? []
      : [
          say(
            "stored-charge",
            `pins ${inlet.id} not complete`,
            "unknown",
            `What the pins of ${circuit.view.name(inlet.id)} hold is not worked out for every combination of so many switches.`,
            [inlet.id],
          ),
        ];
    const told = charges.map((charge) => {
      const { setting, capacitors, bleeders, nanofarads, volts } = charge;
      const id = `pins ${inlet.id} ${setting}`;
      const elements = [inlet.id, ...capacitors, ...bleeders];
      const where = settingText(charge);
      if (volts === null || nanofarads === null)
        return say(
          "stored-charge",
          id,
          "unknown",
          `What the pins of ${circuit.view.name(inlet.id)} hold after unplugging, ${where}, is not known.`,
          elements,
        );
      const exempt = nanofarads <= residualExemptNanofarads.value;
      const level: StatementLevel = exempt || volts <= residualVolts.value ? "good" : "danger";
      return say(
        "stored-charge",
        id,
        level,
        `${figure(nanofarads)} nF on the pins of ${circuit.view.name(inlet.id)} ${where}: ${figure(Math.max(volts, 0))} V after ${figure(residualSeconds.value)} s; the limit is ${figure(residualVolts.value)} V${exempt ? ", and so little capacitance is exempt" : ""}.`,
        elements,
      );
    });
    return [...told, ...open];
  });
}

export function batteryStatements(circuit: Circuit): Statement[] {
  return analyseBatteries(circuit).flatMap(({ battery, findings }) =>
    findings.map(({ verdict, ...reason }, index) =>
      fromReason("battery", `${battery} ${index}`, verdict === null ? "caution" : levelOf(verdict), reason),
    ),
  );
}
