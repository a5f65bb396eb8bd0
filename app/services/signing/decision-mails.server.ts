import { inArray } from "drizzle-orm";
import { tables, type Transaction } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { enqueueMails } from "~/services/mail/enqueue-mail.server";
import type { UnitRow } from "~/services/unit-act.server";

const { people } = tables;

interface Told {
  unit: UnitRow;
  at: Date;
  kind: "signed" | "refused" | "sent-back" | "withdrawn";
  /** Reasons, or what was stated. */
  statement: string;
  recheckOn: string | null;
}

/** Tells the builder and the inspector how it was decided; in the transaction of the decision itself. */
export async function mailDecision(context: ServiceContext, tx: Transaction, told: Told): Promise<void> {
  const { unit, at } = told;
  const { workshop, person, appUrl } = context;
  const ids = [unit.builderId, unit.inspectorId].filter((id) => id !== null && id !== person.id);
  if (ids.length === 0) return;
  const recipients = await tx
    .select({ id: people.id, name: people.name, email: people.email })
    .from(people)
    .where(
      inArray(
        people.id,
        ids.filter((id) => id !== null),
      ),
    );
  const name = `Unit ${unit.number}, “${unit.name}”`;
  await enqueueMails(
    tx,
    recipients.map((recipient) => ({
      workshopId: workshop.id,
      recipient: recipient.email,
      toName: recipient.name,
      at,
      subject: subjectOf(told.kind, unit),
      paragraphs: paragraphsOf(told, name, person.name, recipient.id === unit.builderId),
      link:
        told.kind === "sent-back"
          ? { label: "See what is to be done", href: `${appUrl}/w/${workshop.slug}/units/${unit.number}` }
          : { label: "See the record", href: `${appUrl}/w/${workshop.slug}/archive/${unit.number}` },
      from: workshop.isDemo ? `${workshop.name} (demonstration, all data invented)` : workshop.name,
    })),
  );
}

function subjectOf(kind: Told["kind"], unit: UnitRow): string {
  const what = { signed: "signed", refused: "refused", "sent-back": "sent back", withdrawn: "withdrawn" }[
    kind
  ];
  return `Unit ${unit.number} was ${what}: ${unit.name}`.slice(0, 200);
}

function paragraphsOf(
  { kind, statement, recheckOn }: Told,
  name: string,
  by: string,
  toBuilder: boolean,
): string[] {
  switch (kind) {
    case "signed":
      return [
        `${name}, was signed by ${by}. It may be plugged in under the conditions in the record, until ${recheckOn ?? "the recheck date"}.`,
        "Any change to the unit ends this: have it examined again first.",
      ];
    case "refused":
      return [`${name}, was refused by ${by}. It must not be plugged in.`, `The reasons: ${statement}`];
    case "sent-back":
      return [
        `${name}, was sent back from review by ${by}. It must not be plugged in meanwhile.`,
        `What stands in the way: ${statement}`,
        ...(toBuilder ? ["Answer the findings, put it right and submit it again as a new revision."] : []),
      ];
    case "withdrawn":
      return [
        `The signature on ${name}, was withdrawn by ${by}. It must not be plugged in any more: unplug it now and mark it.`,
        `The reason: ${statement}`,
      ];
  }
}
