import { and, desc, eq } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError } from "~/services/errors";
import { confirmPassword } from "~/services/people/authenticate.server";
import { mailDecision } from "~/services/signing/decision-mails.server";
import { findUnit, moveUnit } from "~/services/unit-act.server";

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
 * is a new entry beside it. A second click on the same form finds it done.
 *
 * @throws AuthenticationError, ThrottledError, GuardError without a reason, ForbiddenError, ConflictError
 */
export async function withdrawUnit(context: ServiceContext, input: WithdrawInput): Promise<void> {
  await confirmPassword(context.db, context.person, input, context.now());
  try {
    await withdraw(context, input);
  } catch (error) {
    if (error instanceof ConflictError && (await doneByThisForm(context, input))) return;
    throw error;
  }
}

function withdraw(context: ServiceContext, input: WithdrawInput): Promise<void> {
  const reason = input.reason.trim();
  return moveUnit(context, "withdraw", input, {
    guards: () => ({
      "reason-given": reason === "" ? ["Say why it is withdrawn: whoever uses the unit must know."] : [],
      // Confirmed before the transaction began; without it this line is not reached.
      "signer-authenticated": [],
    }),
    async work(act) {
      const { tx, unit, at } = act;
      const [signed] = await tx
        .select({ recordId: records.id })
        .from(records)
        .innerJoin(decisions, eq(decisions.id, records.decisionId))
        .where(and(eq(records.unitId, unit.id), eq(decisions.kind, "signed")))
        .orderBy(desc(records.id))
        .limit(1);
      if (!signed) throw new Error(`Unit ${unit.number} is signed but has no record.`);
      await tx.insert(withdrawals).values({ recordId: signed.recordId, byId: context.person.id, reason, at });
      await mailDecision(context, act, { name: "withdraw", statement: reason, recheckOn: null });
      return { result: undefined, detail: { recordId: signed.recordId } };
    },
  });
}

/** The unit is one step on from the form's version and the same person withdrew it: nothing but this form did it. */
async function doneByThisForm(
  { db, workshop, person }: ServiceContext,
  input: WithdrawInput,
): Promise<boolean> {
  const unit = await findUnit(db, workshop.id, input.unitNumber);
  if (!unit || unit.version !== input.expectedVersion + 1) return false;
  const [own] = await db
    .select({ id: withdrawals.id })
    .from(withdrawals)
    .innerJoin(records, eq(records.id, withdrawals.recordId))
    .where(and(eq(records.unitId, unit.id), eq(withdrawals.byId, person.id)));
  return own !== undefined;
}
