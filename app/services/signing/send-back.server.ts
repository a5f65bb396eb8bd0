import { eq, max } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { FindingSeverity } from "~/services/bench/sheet-view";
import type { ServiceContext } from "~/services/context.server";
import { moveUnit } from "~/services/unit-act.server";
import { loadRevision } from "~/services/units/load-revision.server";
import { startRevision } from "~/services/units/start-revision.server";
import { mailDecision } from "./decision-mails.server";

const { findings } = tables;

export interface SendBackInput {
  unitNumber: number;
  expectedVersion: number;
  reason: string;
  severity: FindingSeverity;
}

/**
 * Sends a unit back from review. The reason becomes a finding, so that the builder answers it and an inspector
 * closes it like any other; a new revision is opened for the rework.
 *
 * @throws GuardError without a reason, ForbiddenError, ConflictError
 */
export function sendBackFromReview(
  context: ServiceContext,
  input: SendBackInput,
): Promise<{ finding: number }> {
  const reason = input.reason.trim();
  return moveUnit(context, "sendBackFromReview", input, {
    guards: () => ({
      "reason-given": reason === "" ? ["Say what stands in the way: the builder must know."] : [],
    }),
    async work(act) {
      const { tx, unit, at } = act;
      const examined = await loadRevision(tx, unit);
      const [last] = await tx
        .select({ number: max(findings.number) })
        .from(findings)
        .where(eq(findings.unitId, unit.id));
      const finding = (last?.number ?? 0) + 1;
      await tx.insert(findings).values({
        unitId: unit.id,
        revisionId: examined.id,
        number: finding,
        severity: input.severity,
        text: reason,
        raisedById: context.person.id,
        raisedAt: at,
      });
      const revision = await startRevision(tx, unit, at, { reason, byId: context.person.id });
      await mailDecision(context, act, { name: "sendBackFromReview", statement: reason, recheckOn: null });
      return { result: { finding }, changes: { revision }, detail: { finding, newRevision: revision } };
    },
  });
}
