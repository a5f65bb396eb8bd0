import type { CheckDefinition } from "../bench-check";
import { because, beforeTouching, caution, examination, keyOf, practice } from "../check-parts";

/** The wiring inside against the map: everything computed rests on the map being true. */
export const visualWiring: CheckDefinition = {
  id: "visual-wiring",
  family: "visual",
  derive(view) {
    const conductors = view.wired.map(({ id }) => id);
    const mains = view.wired.filter(({ circuit }) => circuit === "mains").map(({ id }) => id);
    const elv = view.wired.filter(({ circuit }) => circuit === "elv").map(({ id }) => id);
    return [
      {
        key: keyOf("visual-wiring"),
        family: "visual",
        title: "Wiring is as on the map",
        why: [
          because("Every computed answer holds only if the unit is wired as the map says.", [], conductors),
        ],
        method: [
          "Follow every conductor from end to end and tick it on the diagram. Note any that is not on the map.",
          "Compare cross-section and insulation with the map, by print on the sheath or by gauge.",
          "Tug each joint. Screws on tinned strands, bare twisted joints, glue and tape alone don't count as fixed.",
        ],
        cautions: [...beforeTouching(view), caution.charge],
        computed: null,
        asks: examination(
          "Is the unit wired as the map says, and is each joint firm?",
          "As on the map, all joints firm",
          "Something differs or is loose",
        ),
        photo: "required",
        citations: [practice("examination before test")],
        subjects: { elements: [...view.elements.keys()], conductors },
      },
      ...(mains.length > 0 && elv.length > 0
        ? [
            {
              key: keyOf("visual-segregation"),
              family: "visual" as const,
              title: "Mains and extra-low voltage are kept apart",
              why: [
                because(
                  "A mains wire that comes loose must not reach anything of the extra-low-voltage side.",
                  [],
                  [...mains, ...elv],
                ),
              ],
              method: [
                "Look for places where mains and extra-low-voltage wires touch, share a bundle or a connector.",
                "Imagine each mains end coming off its terminal: could it touch the other side or bare metal?",
              ],
              cautions: [...beforeTouching(view), caution.charge],
              computed: null,
              asks: examination(
                "Are mains and extra-low-voltage wires apart, with a second fixing at each mains end?",
                "Apart or with a barrier, second fixing present",
                "They touch, or a loose end could reach the other side",
              ),
              photo: "required" as const,
              citations: [practice("segregation of circuits")],
              subjects: { elements: [], conductors: [...mains, ...elv] },
            },
          ]
        : []),
    ];
  },
};
