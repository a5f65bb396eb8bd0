import type { BenchCheck, CheckDefinition } from "../bench-check";
import { because, beforeTouching, caution, examination, keyOf, practice } from "../check-parts";

/** Cord, plug, strain relief and enclosure, by eye and hand, before any instrument is connected. */
export const visualOutside: CheckDefinition = {
  id: "visual-outside",
  family: "visual",
  derive(view) {
    const inlets = [...view.ofKind("mains-inlet"), ...view.ofKind("dc-inlet")];
    const cords = inlets.map(({ id, kind }): BenchCheck => ({
      key: keyOf("visual-cord", id),
      family: "visual",
      title: `Cord, plug and strain relief of ${view.name(id)}`,
      why: [because(`${view.name(id)} is where energy enters; most faults of equipment can be seen.`, [id])],
      method: [
        "With the unit unplugged, bend the cord along its whole length and look for cuts, cracks and heat marks.",
        "Pull and twist the cord where it enters the plug and the case: its sheath must be held, not its cores.",
        ...(kind === "mains-inlet"
          ? ["Open a rewirable plug: the earth core is the longest and would pull out last."]
          : []),
      ],
      cautions: [caution.unplug],
      computed: null,
      asks: examination(
        "Are cord, plug or inlet and strain relief whole and firm?",
        "Whole, right for the current, sheath held at both ends",
        "Damaged, loose, or cores pulled",
      ),
      photo: "optional",
      citations: [
        practice(
          "examination before test",
          "IEC 60335-1 clause 25.15 gives pull and torque for a type test.",
        ),
      ],
      subjects: { elements: [id], conductors: [] },
    }));
    return [
      ...cords,
      {
        key: keyOf("visual-enclosure"),
        family: "visual",
        title: "Enclosure",
        why: [because("The enclosure keeps people from live parts and fire from spreading.")],
        method: [
          "Look for cracks, missing screws, covers that open without a tool, and openings a finger or a dropped screw fits through.",
          "Name the material. Wood, acrylic, printed plastic without a rating and cardboard burn and soften.",
          "Look for vents that are covered and for liquid or dust inside.",
        ],
        cautions: [...beforeTouching(view), caution.charge],
        computed: null,
        asks: examination(
          "Does the enclosure keep fingers, tools and burning parts where they belong?",
          "Closed, firm, of a suitable material",
          "Live parts within reach, or a material that burns beside them",
        ),
        photo: "required",
        citations: [practice("examination before test")],
        subjects: { elements: view.ofKind("accessible-part").map(({ id }) => id), conductors: [] },
      },
    ];
  },
};
