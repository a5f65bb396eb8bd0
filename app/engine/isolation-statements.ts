import type { Join, Statement, StatementLevel } from "./analysis";
import type { Circuit } from "./circuit";
import { bondingOf, devicesInEarth } from "./earthing";
import { earthedNeutrals } from "./earth-net";
import { hasMains } from "./insulation";
import { joinText } from "./joins";
import { mixedBody, stillLive } from "./isolation-parts";
import { judgeMainsIsolation } from "./mains-isolation";
import type { RuleSet } from "./rule-set";
import { fromReason, levelOf, say, type Results } from "./statement-parts";
import type { UnitFacts } from "./unit-facts";
import { list } from "./wording";

export function joinStatement({ view }: Circuit, join: Join): Statement {
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

export function isolationStatements(
  circuit: Circuit,
  { isolation, fusing }: Results,
  ruleSet: RuleSet,
): Statement[] {
  const { view } = circuit;
  const statements: Statement[] = [];
  const told = new Set<string>();
  for (const inlet of view.ofKind("mains-inlet")) {
    const judged = judgeMainsIsolation(view, isolation, fusing, ruleSet, inlet);
    if (judged === null) continue;
    judged.reasons.forEach(({ verdict, reason }, index) => {
      const level = judged.by === "plug" && verdict !== "pass" ? "caution" : levelOf(verdict, "danger");
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
  for (const id of earthedNeutrals(circuit)) {
    statements.push(
      say(
        "isolation",
        `earthed neutral ${id}`,
        "caution",
        `The neutral of ${view.name(id)} is joined with protective earth, as a residual-current device behind it needs. Only one such joint may be in use at a time.`,
        [id],
      ),
    );
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

export function earthStatements(circuit: Circuit, facts: UnitFacts): Statement[] {
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
  for (const { part, verdict, text, through, conductors } of bondingOf(circuit).values()) {
    const element = view.elements.get(part);
    const doubleInsulated = element?.kind === "accessible-part" && element.reinforcedFromMains === "yes";
    if (doubleInsulated && verdict !== "pass") continue;
    statements.push(
      say(
        "protective-earth",
        `bond ${part}`,
        levelOf(verdict, "danger"),
        text,
        [part, ...through],
        conductors,
      ),
    );
  }
  return statements;
}
