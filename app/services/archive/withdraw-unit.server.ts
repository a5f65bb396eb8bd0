import { and, desc, eq } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { confirmPassword } from "~/services/people/authenticate.server";
import { mailDecision } from "~/services/signing/decision-mails.server";
import { moveUnit } from "~/services/unit-act.server";

const { decisions, records, withdrawals } = tables;

export interface WithdrawInput {
  unitNumber: number;
  expectedVersion: number;
  reason: string;
  /** Asked for again in the act. */
  password: string;
  /** Where the request came from, for throttling. */
  address: string;
}

/**
 * Withdraws the signature on a unit: from now on it must not be plugged in. The record stays as it is; the withdrawal
 * is a new entry beside it.
 *
 * @throws AuthenticationError, ThrottledError, GuardError without a reason, ForbiddenError, ConflictError
 */
export async function withdrawUnit(context: ServiceContext, input: WithdrawInput): Promise<void> {
  await confirmPassword(context.db, context.person, input, context.now());
  const reason = input.reason.trim();
  await moveUnit(context, "withdraw", input, {
    guards: () => ({
      "reason-given": reason === "" ? ["Say why it is withdrawn: whoever uses the unit must know."] : [],
      // Confirmed before the transaction began; without it this line is not reached.
      "signer-authenticated": [],
    }),
    async work({ tx, unit, at }) {
      const [signed] = await tx
        .select({ recordId: records.id })
        .from(records)
        .innerJoin(decisions, eq(decisions.id, records.decisionId))
        .where(and(eq(records.unitId, unit.id), eq(decisions.kind, "signed")))
        .orderBy(desc(records.id))
        .limit(1);
      if (!signed) throw new Error(`Unit ${unit.number} is signed but has no record.`);
      await tx.insert(withdrawals).values({ recordId: signed.recordId, byId: context.person.id, reason, at });
      await mailDecision(context, tx, { unit, at, kind: "withdrawn", statement: reason, recheckOn: null });
      return { result: undefined, detail: { recordId: signed.recordId } };
    },
  });
}
