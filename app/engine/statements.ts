import type { Analysis, Join, Statement, StatementFamily, StatementLevel, Verdict3 } from "./analysis";
import { isHazardous, judgeLamp, lampText, pathText, verdictOf } from "./backfeed";
import { analyseBatteries } from "./battery-analysis";
import type { Reason } from "./bench-check";
import type { Circuit } from "./circuit";
import { bondingOf, devicesInEarth } from "./earthing";
import { figure } from "./figure";
import { hasMains } from "./insulation";
import { joinText } from "./joins";
import { leakageSum } from "./leakage";
import { judgeMainsIsolation, mixedBody, stillLive } from "./mains-isolation";
import type { RuleSet } from "./rule-set";
import { pinCharges } from "./stored-charge";
import type { UnitFacts } from "./unit-facts";
import { list } from "./wording";

/** The engine's findings as sentences, worst first, for the builder while editing and for the reviewer. */
export function statementsOf(
  circuit: Circuit,
  analysis: Omit<Analysis, "statements" | "problems">,
  ruleSet: RuleSet,
  facts: UnitFacts,
): Statement[] {
  const all = [
    ...analysis.isolation.joins.map((join) => joinStatement(circuit, join)),
    ...isolationStatements(circuit, analysis, ruleSet),
    ...earthStatements(circuit, facts),
    ...reverseStatements(circuit, analysis),
    ...fusingStatements(circuit, analysis),
    ...insulationStatements(analysis),
    ...leakageStatements(circuit, ruleSet, facts),
    ...chargeStatements(circuit, ruleSet, facts),
    ...batteryStatements(circuit),
  ];
  return all.sort((a, b) => levels.indexOf(a.level) - levels.indexOf(b.level));
}

const levels: StatementLevel[] = ["danger", "defect", "unknown", "caution", "good"];

/** Level of a verdict: a fail is a defect unless somebody could be hurt at once. */
const levelOf = (verdict: Verdict3, onFail: StatementLevel = "defect"): StatementLevel =>
  verdict === "fail" ? onFail : verdict === "unknown" ? "unknown" : "good";

function say(
  family: StatementFamily,
  id: string,
  level: StatementLevel,
  text: string,
  elements: string[] = [],
  conductors: string[] = [],
): Statement {
  return {
    id: `${family} ${id}`,
    family,
    level,
    text,
    elements: [...new Set(elements)],
    conductors: [...new Set(conductors)],
  };
}

const fromReason = (
  family: StatementFamily,
  id: string,
  level: StatementLevel,
  { text, elements, conductors }: Reason,
) => say(family, id, level, text, elements, conductors);

function joinStatement({ view }: Circuit, join: Join): Statement {
  const level: StatementLevel = join.certainty === "possible" ? "unknown" : "danger";
  return say(
    "isolation",
    join.id,
    level,
    joinText(view, join),
    [join.source, join.other, ...join.switchesOn],
    join.conductors,
  );
}

type Results = Omit<Analysis, "statements" | "problems">;

function isolationStatements(
  { view }: Circuit,
  { isolation, fusing }: Results,
  ruleSet: RuleSet,
): Statement[] {
  const statements: Statement[] = [];
  const told = new Set<string>();
  for (const inlet of view.ofKind("mains-inlet")) {
    const judged = judgeMainsIsolation(view, isolation, fusing, ruleSet, inlet);
    if (judged === null) continue;
    judged.reasons.forEach((reason, index) => {
      const level =
        judged.by === "plug"
          ? "caution"
          : index === 0 || judged.verdict !== "pass"
            ? levelOf(judged.verdict, "danger")
            : "good";
      statements.push(fromReason("isolation", `mains ${inlet.id} ${index}`, level, reason));
      told.add(reason.text);
    });
    const live = stillLive(isolation, inlet.id);
    if (judged.verdict === "pass" && live.length > 0) {
      statements.push(
        say(
          "isolation",
          `before switch ${inlet.id}`,
          "caution",
          `With every switch off, ${list(live)} before the switch stay live from ${view.name(inlet.id)}: pull the plug before opening the unit.`,
          [inlet.id],
          live,
        ),
      );
    }
  }
  for (const { element } of isolation.switches) {
    const mixed = mixedBody(view, isolation, element);
    if (mixed !== null && !told.has(mixed.text))
      statements.push(say("isolation", `mixed ${element}`, levelOf(mixed.verdict), mixed.text, [element]));
  }
  for (const battery of view.ofKind("battery")) {
    const live = stillLive(isolation, battery.id);
    const atMains = live.filter((id) => view.conductors.get(id)?.circuit === "mains");
    if (atMains.length > 0) {
      statements.push(
        say(
          "isolation",
          `inverter ${battery.id}`,
          "danger",
          `With every switch off and the plug pulled, ${list(atMains)} stay at mains voltage, made from ${view.name(battery.id)}.`,
          [battery.id],
          atMains,
        ),
      );
    }
    if (live.length > 0) {
      statements.push(
        say(
          "isolation",
          `battery ${battery.id}`,
          "caution",
          `With every switch off, ${list(live)} stay live from ${view.name(battery.id)}, with the plug pulled too.`,
          [battery.id],
          live,
        ),
      );
    }
  }
  for (const contact of fusing.contacts) {
    if (contact.verdict === "pass" || told.has(contact.text)) continue;
    statements.push(
      say(
        "isolation",
        `contact ${contact.switch} ${contact.source}`,
        levelOf(contact.verdict),
        contact.text,
        [contact.switch, contact.source],
      ),
    );
  }
  return statements;
}

function earthStatements(circuit: Circuit, facts: UnitFacts): Statement[] {
  const { view } = circuit;
  const statements = devicesInEarth(circuit).map((id) =>
    say(
      "protective-earth",
      `device ${id}`,
      "danger",
      `${view.name(id)} sits in the protective conductor. Earth is never switched or fused.`,
      [id],
    ),
  );
  if (!hasMains(circuit) || facts.protectionClass !== "I") return statements;
  for (const [id, { bonded, through, conductors }] of bondingOf(circuit)) {
    const element = view.elements.get(id);
    const doubleInsulated = element?.kind === "accessible-part" && element.reinforcedFromMains === "yes";
    if (bonded)
      statements.push(
        say(
          "protective-earth",
          `bond ${id}`,
          "good",
          `${view.name(id)} is joined to the earth pin by ${list(conductors)}.`,
          [id],
          conductors,
        ),
      );
    else if (!doubleInsulated && through.length > 0) {
      statements.push(
        say(
          "protective-earth",
          `bond ${id}`,
          "danger",
          `${view.name(id)} is joined to earth only through ${list(through.map((each) => view.name(each)))}.`,
          [id, ...through],
          conductors,
        ),
      );
    } else if (!doubleInsulated) {
      statements.push(
        say("protective-earth", `bond ${id}`, "danger", `${view.name(id)} is not joined to the earth pin.`, [
          id,
        ]),
      );
    }
  }
  return statements;
}

function reverseStatements({ view }: Circuit, { reverse }: Results): Statement[] {
  const paths = reverse.paths.map((path) => {
    const verdict = verdictOf(view, path);
    const level =
      verdict === "pass"
        ? "caution"
        : levelOf(verdict, path.failed === null && isHazardous(view, path) ? "danger" : "defect");
    return say(
      "reverse",
      path.id,
      level,
      pathText(view, path),
      [path.from, ...path.via, path.to],
      path.conductors,
    );
  });
  const lamps = view.ofKind("indicator").flatMap(({ id }): Statement[] => {
    const judged = judgeLamp(view, reverse, id);
    if (judged === null) return [];
    const lies = reverse.falseIndications.filter(({ indicator }) => indicator === id);
    if (lies.length === 0)
      return judged.reasons.map((reason, index) =>
        fromReason("reverse", `lamp ${id} ${index}`, levelOf(judged.verdict), reason),
      );
    return lies.map((lie) =>
      say(
        "reverse",
        `lamp ${id} ${lie.litBy} ${lie.failed ?? ""}`,
        lie.failed !== null ? "caution" : lie.certainty === "certain" ? "defect" : "unknown",
        lampText(view, lie),
        [id, lie.litBy, ...(lie.failed === null ? [] : [lie.failed])],
      ),
    );
  });
  return [...paths, ...lamps];
}

function fusingStatements({ view }: Circuit, { fusing }: Results): Statement[] {
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
    const verdicts = [report.loadVerdict, report.breakingVerdict, report.voltageVerdict];
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

function insulationStatements({ insulation }: Results): Statement[] {
  return insulation.barriers.map(({ id, verdict, text, elements }) =>
    say("insulation", id, levelOf(verdict), text, elements),
  );
}

function leakageStatements(circuit: Circuit, ruleSet: RuleSet, facts: UnitFacts): Statement[] {
  const sum = leakageSum(circuit, facts);
  if (!hasMains(circuit) || sum.parts.length === 0) return [];
  const limit =
    facts.protectionClass === "I" ? ruleSet.values.protectiveConductorCurrent : ruleSet.values.touchCurrent;
  const verdict: Verdict3 = sum.milliamps > limit.value ? "fail" : sum.complete ? "pass" : "unknown";
  const amount = `${sum.complete ? "" : "at least "}${figure(sum.milliamps)} mA`;
  return [
    say(
      "leakage",
      "sum",
      levelOf(verdict),
      `Capacitors and supplies leak ${amount} to earth at most; the limit is ${figure(limit.value)} mA.`,
      sum.parts.flatMap(({ elements }) => elements),
    ),
  ];
}

function chargeStatements(circuit: Circuit, ruleSet: RuleSet, facts: UnitFacts): Statement[] {
  const { residualVolts, residualSeconds, residualExemptNanofarads } = ruleSet.values;
  return circuit.view.ofKind("mains-inlet").flatMap((inlet) => {
    const charges = pinCharges(circuit, inlet, facts.supplyVolts, residualSeconds.value).filter(
      ({ capacitors }) => capacitors.length > 0,
    );
    return charges.map(({ setting, capacitors, bleeders, nanofarads, volts }) => {
      const id = `pins ${inlet.id} ${setting}`;
      const elements = [inlet.id, ...capacitors, ...bleeders];
      const where = `with the switches ${setting}`;
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
  });
}

function batteryStatements(circuit: Circuit): Statement[] {
  return analyseBatteries(circuit).flatMap(({ battery, verdict, reasons }) =>
    reasons.map((reason, index) => fromReason("battery", `${battery} ${index}`, levelOf(verdict), reason)),
  );
}
