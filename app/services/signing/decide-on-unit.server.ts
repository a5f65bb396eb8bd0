import { createHash, randomInt } from "node:crypto";
import { and, eq } from "drizzle-orm";
import { isDuplicate, tables } from "~/db/client.server";
import type { SigningConditions } from "~/db/schema/decisions";
import { dayIn, type ServiceContext } from "~/services/context.server";
import { ConflictError, InvalidInputError } from "~/services/errors";
import { enqueueJob } from "~/services/jobs/run-jobs.server";
import { confirmPassword } from "~/services/people/authenticate.server";
import { canonicalRecord } from "~/services/records/canonical-record";
import { composeRecord } from "~/services/records/compose-record.server";
import { type Act, findUnit, moveUnit } from "~/services/unit-act.server";
import { mailDecision } from "./decision-mails.server";
import { loadReview, type Review } from "./load-review.server";
import { lastRecheckDay, nameMatches } from "./signing-rules";
import { type GuardReport, reportGuards } from "./signing-guards.server";
import { prepareSignature } from "./signature-image.server";
import { supersedePredecessors } from "./supersede-predecessors.server";

const { decisions, records, units } = tables;

export type SignatureInput =
  | { method: "drawn"; png: Uint8Array }
  /** Typed in the person's own hand instead of drawn: must be the name on the licence. */
  | { method: "typed"; typedName: string };

interface DecisionInput {
  unitNumber: number;
  /** The unit's version that the form was made from. */
  expectedVersion: number;
  /** What is stated by signing; for a refusal, the reasons. */
  statement: string;
  signature: SignatureInput;
  /** Asked for again in the act. */
  password: string;
  /** Where the request came from, for throttling. */
  address: string;
}

export interface SignInput extends DecisionInput {
  conditions: SigningConditions;
  recheckOn: string;
  /** Why it may be used although checks fail; null where none fails. */
  departures: string | null;
}

export type RefuseInput = DecisionInput;

export interface MadeDecision {
  publicCode: string;
  sha256: string;
  /** It had been made by an earlier click on the same form. */
  before: boolean;
}

/**
 * Signs a unit: every guard is weighed under the unit's row lock; decision, record, PDF job, mails, new state, trail
 * entry and the end of the version before it are one transaction. A second click on the same form gets the first one's result.
 *
 * @throws InvalidInputError, AuthenticationError, ThrottledError, GuardError, ForbiddenError, ConflictError
 */
export async function signUnit(context: ServiceContext, input: SignInput): Promise<MadeDecision> {
  checkRecheckDay(input.recheckOn, dayIn(context.workshop.timeZone, context.now()));
  const signature = await prepare(input.signature);
  await confirmPassword(context.db, context.person, input, context.now());
  return onceOnly(context, input, "signed", () => {
    let review: Review;
    let report: GuardReport;
    return moveUnit(context, "sign", input, {
      async guards(act) {
        ({ review, report } = await weigh(context, act));
        checkName(input.signature, report);
        const { guards } = report;
        return {
          "checks-decided": [
            ...texts(guards["checks-decided"]),
            ...departuresMissing(report, input.departures),
          ],
          "photos-present": texts(guards["photos-present"]),
          "no-open-danger": texts(guards["no-open-danger"]),
          "instruments-in-calibration": texts(guards["instruments-in-calibration"]),
          "licence-in-date": texts(guards["licence-in-date"]),
          "licence-in-scope": texts(guards["licence-in-scope"]),
          // Both were checked before the transaction began; without them this line is not reached.
          "signer-authenticated": [],
          "signature-given": [],
        };
      },
      async work(act) {
        const { result, detail } = await writeDecision(context, act, review, report, {
          kind: "signed",
          statement: input.statement,
          departures: report.failed.length > 0 ? input.departures : null,
          conditions: input.conditions,
          recheckOn: input.recheckOn,
          signature,
        });
        const supersedes = await supersedePredecessors(context, act.tx, act.unit);
        return { result, detail: supersedes.length > 0 ? { ...detail, supersedes } : detail };
      },
    });
  });
}

/**
 * Refuses a unit: it must not be plugged in. The same care as {@link signUnit}; the sheet need not be complete.
 *
 * @throws the same
 */
export async function refuseUnit(context: ServiceContext, input: RefuseInput): Promise<MadeDecision> {
  const signature = await prepare(input.signature);
  await confirmPassword(context.db, context.person, input, context.now());
  return onceOnly(context, input, "refused", () => {
    let review: Review;
    let report: GuardReport;
    return moveUnit(context, "refuse", input, {
      async guards(act) {
        ({ review, report } = await weigh(context, act));
        checkName(input.signature, report);
        return {
          "licence-in-date": texts(report.guards["licence-in-date"]),
          "licence-in-scope": texts(report.guards["licence-in-scope"]),
          "signer-authenticated": [],
          "signature-given": [],
          "reason-given": input.statement.trim() === "" ? ["A refusal needs its reasons."] : [],
        };
      },
      work: (act) =>
        writeDecision(context, act, review, report, {
          kind: "refused",
          statement: input.statement,
          departures: null,
          conditions: null,
          recheckOn: null,
          signature,
        }),
    });
  });
}

async function weigh(context: ServiceContext, { tx, unit, at, roles }: Act) {
  const review = await loadReview(context, unit, tx);
  const signer = { person: context.person, roles };
  return { review, report: reportGuards(review, signer, context.workshop.timeZone, at) };
}

function texts(reasons: readonly { text: string }[]): string[] {
  return reasons.map((reason) => reason.text);
}

function departuresMissing({ failed }: GuardReport, departures: string | null): string[] {
  if (failed.length === 0 || departures?.trim()) return [];
  const names = failed.map((line) => line.check.title).join("; ");
  return [
    `${failed.length === 1 ? "A check fails" : `${failed.length} checks fail`} (${names}). Give your reasons why the unit may be used all the same, or refuse it or send it back.`,
  ];
}

type PreparedSignature = { method: "drawn"; image: Buffer } | { method: "typed"; typedName: string };

async function prepare(signature: SignatureInput): Promise<PreparedSignature> {
  if (signature.method === "drawn") return { method: "drawn", image: await prepareSignature(signature.png) };
  return { method: "typed", typedName: signature.typedName.trim() };
}

/** A typed signature is the name on the licence: what an account is called can be changed by its owner. */
function checkName(signature: SignatureInput, { licence }: GuardReport): void {
  if (signature.method === "drawn" || licence === null) return;
  if (!nameMatches(signature.typedName, licence.holderName)) {
    throw new InvalidInputError("typedName", `Type your name as your licence says it: ${licence.holderName}`);
  }
}

function checkRecheckDay(recheckOn: string, today: string): void {
  if (recheckOn <= today) throw new InvalidInputError("recheckOn", "The recheck must be after today.");
  const last = lastRecheckDay(today);
  if (recheckOn > last)
    throw new InvalidInputError("recheckOn", `The recheck must be by ${last}: five years at most.`);
}

interface DecisionContent {
  kind: "signed" | "refused";
  statement: string;
  departures: string | null;
  conditions: SigningConditions | null;
  recheckOn: string | null;
  signature: PreparedSignature;
}

async function writeDecision(
  context: ServiceContext,
  act: Act,
  review: Review,
  report: GuardReport,
  content: DecisionContent,
) {
  const { tx, unit, at } = act;
  const { licence } = report;
  if (!licence) throw new Error("The licence guards let a decision through without a licence.");
  const { signature, ...decision } = content;
  const drawn = signature.method === "drawn" ? signature.image : null;
  const [row] = await tx
    .insert(decisions)
    .values({
      ...decision,
      unitId: unit.id,
      revisionId: review.sheet.revision.id,
      signerId: context.person.id,
      licenceId: licence.id,
      signatureMethod: signature.method,
      signatureImage: drawn,
      typedName: signature.method === "typed" ? signature.typedName : null,
      decidedAt: at,
    })
    .$returningId();
  if (!row) throw new Error("The decision got no id.");

  const publicCode = newPublicCode();
  const publicAddress = `${context.appUrl}/r/${publicCode}`;
  const record = composeRecord(
    review,
    context.workshop,
    {
      ...decision,
      at,
      signer: context.person.name,
      licence,
      signature:
        signature.method === "drawn"
          ? { method: "drawn", imageSha256: createHash("sha256").update(signature.image).digest("hex") }
          : { method: "typed", typedName: signature.typedName },
    },
    { publicCode, publicAddress },
  );
  const { json, sha256 } = canonicalRecord(record);
  const [recordRow] = await tx
    .insert(records)
    .values({
      workshopId: context.workshop.id,
      unitId: unit.id,
      decisionId: row.id,
      publicCode,
      canonicalJson: json,
      sha256,
      madeAt: at,
    })
    .$returningId();
  if (!recordRow) throw new Error("The record got no id.");
  await enqueueJob(tx, "make-record-pdf", recordRow.id, at);
  await mailDecision(context, act, {
    name: content.kind === "signed" ? "sign" : "refuse",
    statement: content.statement,
    recheckOn: content.recheckOn,
  });
  return {
    result: { publicCode, sha256, before: false },
    // The trail's hashes thereby cover the record.
    detail: { recordId: recordRow.id, recordSha256: sha256 },
  };
}

/** About 117 random bits in letters and digits that can't be mistaken for one another when copied from a label. */
function newPublicCode(): string {
  const alphabet = "abcdefghjkmnpqrstvwxyz23456789";
  return Array.from({ length: 24 }, () => alphabet[randomInt(alphabet.length)]).join("");
}

/** Runs the act; when an earlier click on the very same form has done it already, gives that one's result. */
async function onceOnly(
  context: ServiceContext,
  input: { unitNumber: number; expectedVersion: number },
  kind: "signed" | "refused",
  act: () => Promise<MadeDecision>,
): Promise<MadeDecision> {
  try {
    return await act();
  } catch (error) {
    if (!(error instanceof ConflictError) && !isDuplicate(error)) throw error;
    const before = await findOwnDecision(context, input, kind);
    if (before) return before;
    throw error;
  }
}

async function findOwnDecision(
  { db, workshop, person }: ServiceContext,
  { unitNumber, expectedVersion }: { unitNumber: number; expectedVersion: number },
  kind: "signed" | "refused",
): Promise<MadeDecision | null> {
  const unit = await findUnit(db, workshop.id, unitNumber);
  // One step on from the form's version and decided by the same person: nothing but this form can have done it.
  if (!unit || unit.version !== expectedVersion + 1) return null;
  const [found] = await db
    .select({ publicCode: records.publicCode, sha256: records.sha256 })
    .from(decisions)
    .innerJoin(units, eq(units.id, decisions.unitId))
    .innerJoin(records, eq(records.decisionId, decisions.id))
    .where(and(eq(units.id, unit.id), eq(decisions.signerId, person.id), eq(decisions.kind, kind)));
  return found ? { ...found, before: true } : null;
}
