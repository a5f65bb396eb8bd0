import type { BenchCheck, CheckDefinition } from "../bench-check";
import { answer, because, beforeTouching, examination, keyOf, practice, worstVerdict } from "../check-parts";
import { figure } from "../figure";
import { ambientNote, conductorCitations, transformerShortCitation } from "../fusing-citations";
import { guaranteedBreaking, loadableShare, miniatureFuseCitation } from "../fuse-data";
import { joinText } from "../joins";
import type { Citation } from "../rule-set";

/** Each device against load, fault current and voltage; each source against the conductors that it feeds. */
export const fusing: CheckDefinition = {
  id: "fusing",
  family: "fusing",
  derive(view, _ruleSet, _facts, analysis) {
    const { conductors, devices } = analysis.fusing;
    const deviceChecks = [...view.ofKind("fuse"), ...view.ofKind("breaker")].map((device): BenchCheck => {
      const reports = devices.filter((each) => each.device === device.id);
      const verdicts = reports.flatMap((each) => [
        each.loadVerdict,
        each.breakingVerdict,
        each.voltageVerdict,
        each.placementVerdict,
      ]);
      const reasons = reports.flatMap((each) =>
        each.texts.map((text) => because(text, [device.id, each.source])),
      );
      for (const join of analysis.isolation.joins) {
        if (join.kind !== "bridged" || join.other !== device.id) continue;
        verdicts.push(join.certainty === "certain" ? "fail" : "unknown");
        reasons.push(because(joinText(view, join), [device.id], join.conductors));
      }
      const breaking = device.kind === "fuse" ? guaranteedBreaking(device)?.citation : undefined;
      const citations: Citation[] = [
        device.kind === "fuse" ? loadableShare(device.standard).citation : practice("device rating"),
        ...(breaking === undefined ? [] : [breaking]),
        miniatureFuseCitation,
        ...(reports.some(({ source }) => view.elements.get(source)?.kind === "transformer")
          ? [transformerShortCitation]
          : []),
      ];
      return {
        key: keyOf("fuse", device.id),
        family: "fusing",
        title: `${view.name(device.id)} suits load, fault current and voltage`,
        why: [
          because(
            reports.length === 0
              ? `${view.name(device.id)} is on the map, but no source feeds through it.`
              : `${view.name(device.id)} is what stops the current from ${reports.map(({ source }) => view.name(source)).join(" and ")}.`,
            [device.id, ...reports.map(({ source }) => source)],
          ),
        ],
        method: [
          `Take ${view.name(device.id)} out or read its face: rating, letters and voltage are those on the map (${markText(device.ratingAmps, device.acVolts, device.dcVolts)}).`,
          "Its holder fits, is whole and can't be touched when live.",
          "A new one of the same kind is what the mark beside it asks for.",
        ],
        cautions: beforeTouching(view),
        computed: answer(reports.length === 0 ? "unknown" : worstVerdict(verdicts), reasons),
        asks: examination(
          "Is the fitted device the one on the map?",
          "Same type, rating and marks",
          "Another one, bridged, or not to be read",
        ),
        photo: "required",
        citations,
        subjects: { elements: [device.id, ...reports.map(({ source }) => source)], conductors: [] },
      };
    });

    const sources = [...new Set(conductors.map(({ source }) => source))];
    const sourceChecks = sources.map((source): BenchCheck => {
      const fed = conductors.filter((each) => each.source === source);
      const bad = fed.filter(({ verdict }) => verdict !== "pass");
      const told = bad.length > 0 ? bad : fed;
      const devicesHere = [...new Set(fed.flatMap(({ limitedBy }) => limitedBy))];
      return {
        key: keyOf("conductors", source),
        family: "fusing",
        title: `Conductors fed by ${view.name(source)} are protected`,
        why: [
          because(
            `A conductor that ${view.name(source)} can feed with more than it carries burns before anything opens.`,
            [source],
            fed.map(({ conductor }) => conductor),
          ),
        ],
        method: [
          `Find each of ${fed.map(({ conductor }) => conductor).join(", ")} and compare its cross-section with the map.`,
          "Nothing thinner is spliced in, and no wire leaves before the device that protects it.",
          ...ambientNote(fed.flatMap(({ conductor }) => view.conductors.get(conductor) ?? [])),
          ...(view.elements.get(source)?.kind === "battery"
            ? ["Measure the lead from the battery's pole to its fuse; keep it short and covered."]
            : []),
        ],
        cautions: beforeTouching(view),
        computed: answer(
          worstVerdict(fed.map(({ verdict }) => verdict)),
          told.map(({ text, conductor, limitedBy }) => because(text, [source, ...limitedBy], [conductor])),
        ),
        asks: examination(
          "Are the conductors as on the map?",
          "Cross-sections as on the map",
          "Thinner, spliced, or taken off before the fuse",
        ),
        photo: "optional",
        citations: conductorCitations(view, source, fed),
        subjects: { elements: [source, ...devicesHere], conductors: fed.map(({ conductor }) => conductor) },
      };
    });
    return [...deviceChecks, ...sourceChecks];
  },
};

function markText(rating: number | null, acVolts: number | null, dcVolts: number | null): string {
  const rated = (volts: number | null, kind: string) =>
    volts === null ? `${kind} not known` : volts === 0 ? `no ${kind} rating` : `${figure(volts)} V ${kind}`;
  return `${rating === null ? "rating not known" : `${figure(rating)} A`}, ${rated(acVolts, "AC")}, ${rated(dcVolts, "DC")}`;
}
