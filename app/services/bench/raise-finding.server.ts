import { eq, max } from "drizzle-orm";
import { tables } from "~/db/client.server";
import { deriveBenchSheet } from "~/engine/bench-sheet";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError, InvalidInputError, NotFoundError } from "~/services/errors";
import { actOnUnit } from "~/services/unit-act.server";
import { loadRevision } from "~/services/units/load-revision.server";
import { listFindings } from "./findings.server";
import type { FindingSeverity } from "./sheet-view";

const { findings } = tables;

export interface FindingInput {
  unitNumber: number;
  severity: FindingSeverity;
  text: string;
  /** The check or element that it hangs on; at least one. */
  checkKey: string | null;
  elementId: string | null;
}

/**
 * Raises a finding on a check or an element of the unit on the bench. Photos are added to it afterwards.
 *
 * @throws ForbiddenError unless the person has the unit on the bench, InvalidInputError when it hangs on nothing
 */
export function raiseFinding(
  context: ServiceContext,
  input: FindingInput,
): Promise<{ id: number; number: number }> {
  return actOnUnit(context, "bench.work", { unitNumber: input.unitNumber }, async ({ tx, unit, at }) => {
    const text = input.text.trim();
    if (text === "") throw new InvalidInputError("text", "Say what is wrong.");
    const revision = await loadRevision(tx, unit);
    if (input.checkKey === null && input.elementId === null) {
      throw new InvalidInputError("elementId", "Choose the check or the element that the finding is about.");
    }
    if (input.elementId !== null && !revision.map.elements.some(({ id }) => id === input.elementId)) {
      throw new InvalidInputError("elementId", `The map has no element ${input.elementId}.`);
    }
    if (input.checkKey !== null) {
      const checks = deriveBenchSheet(revision.map, revision.ruleSet, revision.facts);
      if (!checks.some(({ key }) => key === input.checkKey)) throw new NotFoundError("This check");
    }
    const [last] = await tx
      .select({ number: max(findings.number) })
      .from(findings)
      .where(eq(findings.unitId, unit.id));
    const number = (last?.number ?? 0) + 1;
    const [row] = await tx
      .insert(findings)
      .values({
        unitId: unit.id,
        revisionId: revision.id,
        number,
        severity: input.severity,
        checkKey: input.checkKey,
        elementId: input.elementId,
        text,
        raisedById: context.person.id,
        raisedAt: at,
      })
      .$returningId();
    if (!row) throw new Error("The finding got no id.");
    return {
      result: { id: row.id, number },
      act: "finding.raise",
      detail: {
        revision: unit.revision,
        finding: row.id,
        number,
        severity: input.severity,
        ...(input.checkKey === null ? {} : { check: input.checkKey }),
        ...(input.elementId === null ? {} : { element: input.elementId }),
      },
    };
  });
}

export interface ClosingInput {
  unitNumber: number;
  findingId: number;
  text: string;
}

/**
 * Closes a finding in the words of the inspector who has the unit on the bench. A closed finding stays closed: what
 * comes up again is a new one.
 *
 * @throws ForbiddenError, NotFoundError, ConflictError when it is closed already
 */
export function closeFinding(context: ServiceContext, input: ClosingInput): Promise<void> {
  return actOnUnit(context, "bench.work", { unitNumber: input.unitNumber }, async ({ tx, unit, at }) => {
    const finding = (await listFindings(tx, unit.id)).find(({ id }) => id === input.findingId);
    if (!finding) throw new NotFoundError("This finding");
    if (finding.closing) {
      throw new ConflictError(`${finding.closing.by} closed finding ${finding.number} before you.`);
    }
    const closingText = input.text.trim();
    if (closingText === "") {
      throw new InvalidInputError("text", "Say what you saw that lets you close this finding.");
    }
    await tx
      .update(findings)
      .set({ closedById: context.person.id, closedAt: at, closingText })
      .where(eq(findings.id, finding.id));
    return {
      result: undefined,
      act: "finding.close",
      detail: { revision: unit.revision, finding: finding.id, number: finding.number },
    };
  });
}
