import { eq } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { unitTitle } from "~/services/mail/hand-over.server";
import { moveUnitWithin, type UnitRow } from "~/services/unit-act.server";
import { mailDecision } from "./decision-mails.server";

const { units } = tables;

/**
 * Ends the signatures on the versions before a unit that is being signed: each that is still in force becomes
 * "superseded", in the transaction of the signature. Called with the signed unit's row locked; every version before
 * has a lower id, so the rows are locked from the highest id down.
 *
 * @returns the numbers of the units that were superseded
 */
export async function supersedePredecessors(
  context: ServiceContext,
  tx: Transaction,
  signed: UnitRow,
): Promise<number[]> {
  const superseded: number[] = [];
  for (let id = signed.predecessorId; id !== null;) {
    const [before] = await tx.select().from(units).where(eq(units.id, id)).for("update");
    if (!before) throw new Error(`The version before unit ${signed.number} is gone.`);
    if (before.state === "signed") {
      await moveUnitWithin(
        context,
        tx,
        "supersede",
        { unitNumber: before.number },
        {
          guards: () => ({}),
          async work(act) {
            await mailDecision(context, act, {
              name: "supersede",
              statement: unitTitle(signed),
              recheckOn: null,
            });
            return { result: undefined, detail: { successor: signed.number } };
          },
        },
      );
      superseded.push(before.number);
    }
    id = before.predecessorId;
  }
  return superseded;
}
