import type { CheckDefinition } from "../bench-check";
import { because, examination, keyOf, practice, whileWorking, worksOnMains } from "../check-parts";

/** Last of all: the unit does what it is for, and its controls do what they say. */
export const operation: CheckDefinition = {
  id: "operation",
  family: "function",
  derive(view) {
    const controls = view.ofKind("switch").map(({ id }) => id);
    const uses = [
      ...view.ofKind("load"),
      ...view.ofKind("outlet"),
      ...view.ofKind("fan"),
      ...view.ofKind("indicator"),
    ].map(({ id }) => id);
    const sources = [
      ...view.ofKind("mains-inlet"),
      ...view.ofKind("dc-inlet"),
      ...view.ofKind("battery"),
    ].map(({ id }) => id);
    return [
      {
        key: keyOf("operation"),
        family: "function",
        title: "The unit works, and off is off",
        why: [
          because("A unit that fails in use tempts people to open it.", [...sources, ...controls, ...uses]),
        ],
        method: [
          "Only when every earlier step has been decided: connect its sources, switch on, run each function at its load.",
          ...(controls.length > 0
            ? [`Work each of ${controls.map((id) => view.name(id)).join(", ")}: it does what its mark says.`]
            : []),
          ...(sources.length > 1
            ? [
                "Take each source away and bring it back while the unit runs: nothing trips, sparks or restarts in a dangerous way.",
              ]
            : []),
        ],
        cautions: [
          ...whileWorking(view),
          "Stop at smell, smoke, noise or heat: switch off, and take every source away from outside.",
        ],
        energised: worksOnMains(view),
        computed: null,
        asks: examination(
          "Does it work as described, in every state?",
          "Works as described",
          "Something doesn't work or surprises",
        ),
        photo: "optional",
        citations: [practice("functional test")],
        subjects: { elements: [...sources, ...controls, ...uses], conductors: [] },
      },
    ];
  },
};
