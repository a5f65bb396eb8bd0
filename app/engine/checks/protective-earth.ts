import type { BenchCheck, CheckDefinition } from "../bench-check";
import {
  answer,
  because,
  beforeTouching,
  caution,
  examination,
  keyOf,
  practice,
  worstVerdict,
} from "../check-parts";
import { circuitOf } from "../circuit";
import { earthLimit } from "../earth-limit";
import { bondingOf, devicesInEarth, originName } from "../earthing";
import { figure } from "../figure";
import { hasMains } from "../insulation";
import type { MapView } from "../map-view";
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

const earthArea: Citation = {
  standard: "IEC 60364-5-54",
  clause: "543.1: equal to the line conductor up to 16 mm²",
  edition: "not checked",
  mark: "M",
  note: "A calculation may allow less; it is not made here.",
};

interface Judged {
  verdict: Verdict3;
  text: string;
  ids: string[];
}

/** Class I: each part that can be touched has a low resistance to the earth pin, and nothing can open that way. */
export const protectiveEarth: CheckDefinition = {
  id: "protective-earth",
  family: "protective-earth",
  derive(view, ruleSet, facts) {
    const circuit = circuitOf(view);
    const outlets = view.ofKind("outlet").filter(({ supply }) => supply === "mains");
    if (!hasMains(circuit)) return [];
    if (facts.protectionClass !== "I") return outlets.length > 0 ? [contactsWithoutEarth(view)] : [];
    const bonding = bondingOf(circuit);
    const interrupting = devicesInEarth(circuit);
    const limit = earthLimit(ruleSet, facts);
    const inlets = view.ofKind("mains-inlet").map(({ id }) => id);
    const earth = view.wired.filter((each) => each.circuit === "earth").map(({ id }) => id);
    const parts = view
      .ofKind("accessible-part")
      .filter(({ reinforcedFromMains }) => reinforcedFromMains !== "yes");
    const spared = new Set(
      view.ofKind("accessible-part").flatMap(({ id }) => (parts.some((each) => each.id === id) ? [] : [id])),
    );
    const joined: Judged[] = [...bonding.values()]
      .filter(({ part }) => !spared.has(part))
      .map(({ part, verdict, text, through }) => ({ verdict, text, ids: [part, ...through] }));
    // Terminals joined to nothing but each other earth nobody: without any part or contact nothing was judged.
    if (![...bonding.keys()].some((id) => !spared.has(id) && !inlets.includes(id)))
      joined.push({
        verdict: "unknown",
        text: "Nothing on the map is said to be earthed: no part, no contact, no terminal.",
        ids: inlets,
      });
    if (inlets.length > 0 && !inlets.some((id) => bonding.has(id)))
      joined.push({
        verdict: "fail",
        text: `${list(inlets.map((id) => view.name(id)))} has no earth pin.`,
        ids: inlets,
      });
    const opened = interrupting.map((id): Judged => ({
      verdict: "fail",
      text: `${view.name(id)} sits in the protective conductor.`,
      ids: [id],
    }));
    const none: Judged = {
      verdict: "pass",
      text: "No switch, fuse or other device sits in a protective conductor.",
      ids: [],
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
        `Follow the green-and-yellow conductor from ${originName(view)} to each part. It passes no switch, no fuse, no plug-in link.`,
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
      citations: [neverSwitched, earthArea],
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
          `Measure from ${originName(view)} to bare metal of ${view.name(id)} with at least ${figure(ruleSet.values.protectiveEarthTestAmps.value)} A.`,
          "Flex the cord along its length and at both ends while you watch the reading; take the highest.",
        ],
        cautions: [...beforeTouching(view), caution.earthLoop],
        computed: null,
        asks: {
          kind: "reading",
          quantity:
            inlets.length > 0
              ? "Resistance from earth pin to part"
              : "Resistance from earth terminal to part",
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

/** Class II has no earth to hand on, so what is plugged into its mains outlets has none either. */
function contactsWithoutEarth(view: MapView): BenchCheck {
  const outlets = view
    .ofKind("outlet")
    .filter(({ supply }) => supply === "mains")
    .map(({ id }) => id);
  const names = list(outlets.map((id) => view.name(id)));
  return {
    key: keyOf("earth-path"),
    family: "protective-earth",
    title: "No outlet pretends to be earthed",
    why: [
      because("A class II unit has no earth, and what is plugged into its outlets may rely on one.", outlets),
    ],
    method: [`Look into ${names}: a plug with an earth contact must not fit.`],
    cautions: beforeTouching(view),
    computed: answer("unknown", [
      because(`Whether ${names} takes plugs with an earth contact is not on the map.`, outlets),
    ]),
    asks: examination(
      "Does no plug with an earth contact fit?",
      "None fits",
      "One fits, or an earth contact is there",
    ),
    photo: "required",
    citations: [practice("outlets of class II units", "From memory.")],
    subjects: { elements: outlets, conductors: [] },
  };
}
