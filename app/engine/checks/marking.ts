import type { BenchCheck, CheckDefinition } from "../bench-check";
import { because, caution, examination, keyOf, practice } from "../check-parts";
import { figure } from "../figure";
import { stillLive } from "../isolation-parts";
import { list } from "../wording";

/** Plate, fuse and switch marks, and the warning where something stays live with the plug pulled. */
export const marking: CheckDefinition = {
  id: "marking",
  family: "marking",
  derive(view, _ruleSet, facts, analysis) {
    const fuses = view.ofKind("fuse");
    const inlets = [...view.ofKind("mains-inlet"), ...view.ofKind("dc-inlet"), ...view.ofKind("outlet")].map(
      ({ id }) => id,
    );
    const hasMains = view.ofKind("mains-inlet").length > 0;
    const staying = view.ofKind("battery").filter(({ id }) => stillLive(analysis.isolation, id).length > 0);
    const checks: BenchCheck[] = [
      {
        key: keyOf("marking-plate"),
        family: "marking",
        title: "Marks on the unit",
        why: [because("Whoever plugs it in must see what it needs and what it gives.", inlets)],
        method: [
          hasMains
            ? `Read the marks: supply ${figure(facts.supplyVolts)} V, ${figure(facts.supplyHertz)} Hz, current or power${facts.protectionClass === "II" ? ", double-square symbol for class II" : ""}, and a name or number of the unit.`
            : "Read the marks: supply voltage and polarity, current, and a name or number of the unit.",
          "Each output tells its voltage and largest current. Off is marked at each mains switch.",
          ...(fuses.length > 0 ? [`Beside each fuse stands what to put in: ${fuseMarks(fuses)}.`] : []),
        ],
        cautions: [],
        computed: null,
        asks: examination(
          "Are the marks there, true and lasting?",
          "All present and true",
          "Something is missing or wrong",
        ),
        photo: "required",
        citations: [practice("marking", "IEC 60335-1 clause 7 from memory.")],
        subjects: { elements: [...inlets, ...fuses.map(({ id }) => id)], conductors: [] },
      },
    ];
    if (staying.length > 0) {
      const ids = staying.map(({ id }) => id);
      const conductors = ids.flatMap((id) => stillLive(analysis.isolation, id));
      checks.push({
        key: keyOf("marking-stays-live", ...ids),
        family: "marking",
        title: "Warning that parts stay live",
        why: [
          because(
            `With every switch off and the plug pulled, ${list(conductors)} stay live from ${list(ids.map((id) => view.name(id)))}.`,
            ids,
            conductors,
          ),
        ],
        method: ["Look for a lasting warning at each cover behind which these conductors run."],
        cautions: [caution.battery],
        computed: null,
        asks: examination("Does a warning at the cover say so?", "Warning present", "No warning"),
        photo: "optional",
        citations: [practice("warning of a second source")],
        subjects: { elements: ids, conductors },
      });
    }
    return checks;
  },
};

function fuseMarks(
  fuses: { id: string; speed: string; ratingAmps: number | null; breakingLetter: string }[],
): string {
  return list(
    fuses.map(({ id, speed, ratingAmps, breakingLetter }) => {
      const parts = [
        speed === "unknown" || speed === "other" ? "" : speed,
        ratingAmps === null ? "rating not known" : `${figure(ratingAmps)} A`,
        breakingLetter === "unknown" || breakingLetter === "none" ? "" : breakingLetter,
      ].filter((part) => part !== "");
      return `${id} ${parts.join(" ")}`;
    }),
  );
}
