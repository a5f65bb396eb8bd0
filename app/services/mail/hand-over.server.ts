import type { Transaction } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { listRoleHolders, type RoleHolder } from "~/services/people/role-holders.server";
import type { Act, StandingUnit } from "~/services/unit-act.server";
import { type Action, decide } from "~/workflow/permissions";
import type { Role } from "~/workflow/roles";
import type { UnitState } from "~/workflow/states";
import { type Audience, type TransitionName, transitions } from "~/workflow/transitions";
import { enqueueMails } from "./enqueue-mail.server";
import type { MailContent } from "./render-mail";

/** Who closes a mail of the workshop, and that it is a demo where it is one. */
export function mailFrom({ workshop }: Pick<ServiceContext, "workshop">): string {
  return workshop.isDemo ? `${workshop.name} (demo: invented people and units)` : workshop.name;
}

/** How mails and pages name a unit: "Unit 7, “Bench supply”". */
export function unitTitle(unit: Pick<StandingUnit, "number" | "name">): string {
  return `Unit ${unit.number}, “${unit.name}”`;
}

export interface Recipient extends RoleHolder {
  /** What makes them hear of it: the first of the transition's audiences that they belong to. */
  as: Audience;
}

/** What one recipient is told: a mail but for whom it goes to and comes from. `link` is a path within the workshop. */
export interface Telling extends Pick<MailContent, "subject" | "paragraphs"> {
  link: { label: string; path: string };
}

/**
 * Everybody whom a transition's row says to tell of it: nobody twice, never the acting person, and nobody who has left
 * the workshop.
 *
 * @param unit as it stood when the transition began
 */
export async function recipientsOf(
  context: ServiceContext,
  tx: Transaction,
  name: TransitionName,
  unit: StandingUnit,
): Promise<Recipient[]> {
  const told = new Map<number, Recipient>();
  for (const audience of transitions[name].tells) {
    for (const { id, name, email } of await listAudience(tx, context.workshop.id, audience, unit)) {
      if (id !== context.person.id && !told.has(id)) told.set(id, { id, name, email, as: audience });
    }
  }
  return [...told.values()];
}

async function listAudience(
  tx: Transaction,
  workshopId: number,
  audience: Audience,
  unit: StandingUnit,
): Promise<RoleHolder[]> {
  switch (audience) {
    case "builder":
      return listRoleHolders(tx, workshopId, "any", unit.builderId);
    case "inspector":
      return unit.inspectorId === null ? [] : listRoleHolders(tx, workshopId, "any", unit.inspectorId);
    case "inspectors":
      return listThoseWhoMay(tx, workshopId, "inspector", "bench.take", { ...unit, state: "submitted" });
    case "signers":
      return listThoseWhoMay(tx, workshopId, "electrician", "signing.sign", {
        ...unit,
        state: "awaiting_signature",
      });
    case "electricians":
      return listRoleHolders(tx, workshopId, "electrician");
  }
}

/** Those who hold the role and stand to the unit as the action demands: a mail must not ask for what they can't do. */
async function listThoseWhoMay(
  tx: Transaction,
  workshopId: number,
  role: Role,
  action: Action,
  unit: StandingUnit & { state: UnitState },
): Promise<RoleHolder[]> {
  const holders = await listRoleHolders(tx, workshopId, role);
  return holders.filter(({ id }) => decide(action, { id, roles: [role] }, unit).allowed);
}

/**
 * Tells everybody concerned of a transition, in its own transaction.
 *
 * @returns how many were told
 */
export async function tellHandOver(
  context: ServiceContext,
  { tx, unit, at }: Pick<Act, "tx" | "unit" | "at">,
  name: TransitionName,
  tell: (recipient: Recipient) => Telling,
): Promise<number> {
  const recipients = await recipientsOf(context, tx, name, unit);
  await tellPeople(context, { tx, at }, recipients, tell);
  return recipients.length;
}

/** Writes one mail of the workshop to each person. */
export async function tellPeople<Person extends RoleHolder>(
  context: ServiceContext,
  { tx, at }: Pick<Act, "tx" | "at">,
  people: readonly Person[],
  tell: (person: Person) => Telling,
): Promise<void> {
  const base = `${context.appUrl}/w/${context.workshop.slug}`;
  await enqueueMails(
    tx,
    people.map((person) => {
      const { subject, paragraphs, link } = tell(person);
      return {
        workshopId: context.workshop.id,
        recipient: person.email,
        toName: person.name,
        at,
        subject: subject.slice(0, 200),
        paragraphs,
        link: { label: link.label, href: `${base}${link.path}` },
        from: mailFrom(context),
      };
    }),
  );
}
