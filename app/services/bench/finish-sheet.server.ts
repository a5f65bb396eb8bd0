import { and, count, eq, isNull } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { tellHandOver, unitTitle } from "~/services/mail/hand-over.server";
import { moveUnit, type UnitActInput } from "~/services/unit-act.server";
import { startRevision } from "~/services/units/start-revision.server";
import { endTurn } from "./bench-turns.server";
import { loadSheet, sheetGuards } from "./load-sheet.server";
import type { Sheet } from "./sheet-view";

const { findings } = tables;

/**
 * Hands a finished sheet over for signature. Failed checks don't stop it: the electrician must be able to refuse on
 * them. Open, undecided and photoless ones do.
 *
 * @throws GuardError with every check that stands in the way
 */
export function finishSheet(context: ServiceContext, input: UnitActInput): Promise<void> {
  let sheet: Sheet;
  return moveUnit(context, "finish", input, {
    guards: async ({ tx, unit }) => {
      sheet = await loadSheet(context, unit, undefined, tx);
      return sheetGuards(sheet);
    },
    work: async (act) => {
      const { unit } = act;
      await endTurn(act);
      const { byVerdict } = sheet.progress;
      const failed = failedWords(byVerdict.fail);
      await tellHandOver(context, act, "finish", (recipient) =>
        recipient.as === "builder"
          ? {
              subject: `${unitTitle(unit)} awaits signature`,
              paragraphs: [
                `${context.person.name} finished the bench sheet of ${unitTitle(unit)}. ${failed}`,
                "An electrician decides next. Until it is signed, don't plug the unit in.",
              ],
              link: { label: "See the unit", path: `/units/${unit.number}` },
            }
          : {
              subject: `${unitTitle(unit)} awaits your review`,
              paragraphs: [
                `${context.person.name} finished the bench sheet of ${unitTitle(unit)}, revision ${unit.revision}.`,
                failed,
              ],
              link: { label: "Review the unit", path: `/signing/${unit.number}` },
            },
      );
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
      const open = await countOpenFindings(tx, unit.id);
      const revision = await startRevision(tx, unit, at, { reason, byId: context.person.id });
      await tellHandOver(context, act, "sendBackFromBench", () => ({
        subject: `${unitTitle(unit)} comes back to you`,
        paragraphs: [
          `${context.person.name} sent ${unitTitle(unit)} back from the bench with ${open} open ${open === 1 ? "finding" : "findings"}.`,
          reason,
          "Answer each finding, change the map where the unit changes, and submit it again. Don't plug the unit in meanwhile.",
        ],
        link: { label: "Answer the findings", path: `/units/${unit.number}/rework` },
      }));
      return { result: undefined, detail: { nextRevision: revision }, changes: { revision } };
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
