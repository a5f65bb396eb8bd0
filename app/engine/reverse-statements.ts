import type { Statement } from "./analysis";
import { isHazardous, judgeLamp, lampText, pathText, verdictOf } from "./backfeed";
import type { Circuit } from "./circuit";
import { fromReason, levelOf, say, type Results } from "./statement-parts";

export function reverseStatements({ view }: Circuit, { reverse }: Results): Statement[] {
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
