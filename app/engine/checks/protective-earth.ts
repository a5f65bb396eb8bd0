import type { BenchCheck, CheckDefinition } from "../bench-check";
import { answer, because, beforeTouching, caution, examination, keyOf, worstVerdict } from "../check-parts";
import { circuitOf } from "../circuit";
import { earthLimit } from "../earth-limit";
import { bondingOf, devicesInEarth } from "../earthing";
import { figure } from "../figure";
import type { Citation } from "../rule-set";
import type { Verdict3 } from "../analysis";
import { list } from "../wording";

const neverSwitched: Citation = {
  standard: "IEC 61140",
  clause: "protective conductors are neither switched nor fused",
  edition: "not checked",
  mark: "V",
  note: "Seen for the rule; the clause's wording from memory.",
};

/** Class I: each part that can be touched has a low resistance to the earth pin, and nothing can open that way. */
export const protectiveEarth: CheckDefinition = {
  id: "protective-earth",
  family: "protective-earth",
  derive(view, ruleSet, facts) {
    if (facts.protectionClass !== "I" || view.ofKind("mains-inlet").length === 0) return [];
    const circuit = circuitOf(view);
    const bonding = bondingOf(circuit);
    const interrupting = devicesInEarth(circuit);
    const limit = earthLimit(ruleSet, facts);
    const inlets = view.ofKind("mains-inlet").map(({ id }) => id);
    const earth = view.wired.filter((each) => each.circuit === "earth").map(({ id }) => id);
    const parts = view
      .ofKind("accessible-part")
      .filter(({ reinforcedFromMains }) => reinforcedFromMains !== "yes");
    const outlets = view.ofKind("outlet").filter(({ supply }) => supply === "mains");

    const joined = parts.map(({ id }): { verdict: Verdict3; text: string; ids: string[] } => {
      const found = bonding.get(id);
      if (found?.bonded === true)
        return {
          verdict: "pass",
          text: `${view.name(id)} is joined to the earth pin by ${list(found.conductors)}.`,
          ids: [id],
        };
      const through = found?.through ?? [];
      return through.length > 0
        ? {
            verdict: "fail",
            text: `${view.name(id)} is joined to earth only through ${list(through.map((each) => view.name(each)))}.`,
            ids: [id, ...through],
          }
        : { verdict: "fail", text: `${view.name(id)} is not joined to the earth pin.`, ids: [id] };
    });
    const opened = interrupting.map((id) => ({
      verdict: "fail" as const,
      text: `${view.name(id)} sits in the protective conductor.`,
      ids: [id],
    }));
    const none = {
      verdict: "pass" as const,
      text: "No switch, fuse or other device sits in a protective conductor.",
      ids: [] as string[],
    };
    const all = [...joined, ...(opened.length > 0 ? opened : [none])];

    const path: BenchCheck = {
      key: keyOf("earth-path"),
      family: "protective-earth",
      title: "Earth is joined everywhere and never opened",
      why: [
        because(
          "In a class I unit the earth conductor is what saves a person when insulation fails.",
          inlets,
          earth,
        ),
      ],
      method: [
        "Follow the green-and-yellow conductor from the earth pin to each part. It passes no switch, no fuse, no plug-in link.",
        "Look at each joint: own fixing, toothed washer or bare metal under it, no paint, locked against turning.",
      ],
      cautions: beforeTouching(view),
      computed: answer(
        worstVerdict(all.map(({ verdict }) => verdict)),
        all.map(({ text, ids }) => because(text, ids)),
      ),
      asks: examination(
        "Is each earth joint firm, bare and lasting, and the way unbroken?",
        "Firm and unbroken",
        "Loose, painted, or broken by something",
      ),
      photo: "required",
      citations: [neverSwitched],
      subjects: {
        elements: [
          ...inlets,
          ...view.ofKind("earth-terminal").map(({ id }) => id),
          ...parts.map(({ id }) => id),
          ...interrupting,
        ],
        conductors: earth,
      },
    };
    const readings = [...parts, ...outlets].map(({ id }): BenchCheck => {
      const conductors = bonding.get(id)?.conductors ?? earth;
      return {
        key: keyOf("earth-bond", id),
        family: "protective-earth",
        title: `Earth resistance to ${view.name(id)}`,
        why: [
          because(
            `${view.name(id)} can be touched and becomes live if mains insulation fails.`,
            [id],
            conductors,
          ),
        ],
        method: [
          "Null the leads and note that you did.",
          `Measure from the plug's earth pin to bare metal of ${view.name(id)} with at least ${figure(ruleSet.values.protectiveEarthTestAmps.value)} A.`,
          "Flex the cord along its length and at both ends while you watch the reading; take the highest.",
        ],
        cautions: [...beforeTouching(view), caution.earthLoop],
        computed: null,
        asks: {
          kind: "reading",
          quantity: "Resistance from earth pin to part",
          unit: "Ω",
          limit: {
            kind: "at-most",
            value: limit.ohms,
            unit: "Ω",
            citation: limit.citations[0] ?? neverSwitched,
          },
          instrument: {
            kind: "low-ohm-meter",
            range: `0 to ${figure(Math.max(2, limit.ohms * 2))} Ω, at least 0.2 A`,
          },
          conditions: [`Limit for ${limit.basis}`, "Leads nulled", "Unit unplugged"],
        },
        photo: "none",
        citations: limit.citations,
        subjects: { elements: [...inlets, id], conductors },
      };
    });
    return [path, ...readings];
  },
};
