import { and, count, eq, isNull } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { enqueueMails } from "~/services/mail/enqueue-mail.server";
import { listRoleHolders } from "~/services/people/role-holders.server";
import { moveUnit, type UnitActInput } from "~/services/unit-act.server";
import { startRevision } from "~/services/units/start-revision.server";
import { endTurn } from "./bench-turns.server";
import { findPerson, mailFrom, unitTitle } from "./hand-over.server";
import { loadSheet, sheetGuards } from "./load-sheet.server";

const { findings } = tables;

/**
 * Hands a finished sheet over for signature. Failed checks don't stop it: the electrician must be able to refuse on
 * them. Open, undecided and photoless ones do.
 *
 * @throws GuardError with every check that stands in the way
 */
export function finishSheet(context: ServiceContext, input: UnitActInput): Promise<void> {
  return moveUnit(context, "finish", input, {
    guards: async ({ tx, unit }) => sheetGuards(await loadSheet(context, unit, undefined, tx)),
    work: async (act) => {
      const { tx, unit, at } = act;
      await endTurn(act);
      const { byVerdict } = (await loadSheet(context, unit, undefined, tx)).progress;
      const builder = await findPerson(tx, unit.builderId);
      // Who built or inspected it may not sign it, so the mail would ask for what they can't do.
      const signers = (await listRoleHolders(tx, context.workshop.id, "electrician")).filter(
        ({ id }) => id !== unit.builderId && id !== context.person.id && !unit.inspectorIds.includes(id),
      );
      const failed = failedWords(byVerdict.fail);
      const common = { workshopId: context.workshop.id, from: mailFrom(context), at };
      await enqueueMails(tx, [
        ...signers.map((signer) => ({
          ...common,
          recipient: signer.email,
          toName: signer.name,
          subject: `${unitTitle(unit)} awaits your review`,
          paragraphs: [
            `${context.person.name} finished the bench sheet of ${unitTitle(unit)}, revision ${unit.revision}.`,
            failed,
          ],
          link: {
            label: "Review the unit",
            href: `${context.appUrl}/w/${context.workshop.slug}/signing/${unit.number}`,
          },
        })),
        {
          ...common,
          recipient: builder.email,
          toName: builder.name,
          subject: `${unitTitle(unit)} awaits signature`,
          paragraphs: [
            `${context.person.name} finished the bench sheet of ${unitTitle(unit)}. ${failed}`,
            "An electrician decides next. Until it is signed, don't plug the unit in.",
          ],
          link: {
            label: "See the unit",
            href: `${context.appUrl}/w/${context.workshop.slug}/units/${unit.number}`,
          },
        },
      ]);
      return { result: undefined, detail: { verdicts: byVerdict } };
    },
  });
}

function failedWords(count: number): string {
  if (count === 0) return "No check failed.";
  return `${count} ${count === 1 ? "check" : "checks"} failed.`;
}

/**
 * Sends a unit back to its builder from the bench: needs a reason and at least one open finding, since the findings
 * are what the builder answers. Opens the next revision.
 */
export function sendBackFromBench(
  context: ServiceContext,
  input: UnitActInput & { reason: string },
): Promise<void> {
  const reason = input.reason.trim();
  return moveUnit(context, "sendBackFromBench", input, {
    guards: async ({ tx, unit }) => {
      const open = await countOpenFindings(tx, unit.id);
      return {
        "reason-given": [
          ...(reason === "" ? ["Say why the unit goes back."] : []),
          ...(open === 0
            ? ["Raise at least one finding first: it tells the builder what to put right."]
            : []),
        ],
      };
    },
    work: async (act) => {
      const { tx, unit, at } = act;
      await endTurn(act);
      const builder = await findPerson(tx, unit.builderId);
      const open = await countOpenFindings(tx, unit.id);
      const revision = await startRevision(tx, unit, at);
      await enqueueMails(tx, [
        {
          workshopId: context.workshop.id,
          recipient: builder.email,
          toName: builder.name,
          subject: `${unitTitle(unit)} comes back to you`,
          paragraphs: [
            `${context.person.name} sent ${unitTitle(unit)} back from the bench with ${open} open ${open === 1 ? "finding" : "findings"}.`,
            reason,
            "Answer each finding, change the map where the unit changes, and submit it again. Don't plug the unit in meanwhile.",
          ],
          link: {
            label: "Answer the findings",
            href: `${context.appUrl}/w/${context.workshop.slug}/units/${unit.number}/rework`,
          },
          from: mailFrom(context),
          at,
        },
      ]);
      return { result: undefined, detail: { reason, nextRevision: revision }, changes: { revision } };
    },
  });
}

async function countOpenFindings(tx: Transaction, unitId: number): Promise<number> {
  const [row] = await tx
    .select({ open: count() })
    .from(findings)
    .where(and(eq(findings.unitId, unitId), isNull(findings.closedAt)));
  return row?.open ?? 0;
}
