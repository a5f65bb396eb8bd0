import { and, asc, desc, eq, gt, isNull } from "drizzle-orm";
import type { SignedInPerson } from "~/context";
import { type Database, inTransaction, type Reader, tables, type Transaction } from "~/db/client.server";
import { appendEntry } from "~/services/audit/append-entry.server";
import type { ServiceContext } from "~/services/context.server";
import { AuthenticationError, ConflictError, InvalidInputError, NotFoundError } from "~/services/errors";
import { enqueueMails } from "~/services/mail/enqueue-mail.server";
import { mailFrom } from "~/services/mail/hand-over.server";
import { actOnWorkshop } from "~/services/workshop-act.server";
import { type Role, roles as allRoles, roleTitles } from "~/workflow/roles";
import { authenticate } from "./authenticate.server";
import { hashPassword } from "./passwords.server";
import { hashSecret, newSecret } from "./sessions.server";

const { memberships, people, tokens, workshops } = tables;

const INVITATION_DAYS = 7;
const INVITATION_MS = INVITATION_DAYS * 86_400_000;

/**
 * Invites somebody by mail to hold roles in the workshop. Whether the mail belongs to a person of another workshop is
 * not told: they appear here once they accept. An earlier invitation of the same mail is replaced.
 *
 * @throws InvalidInputError when that person is a member already
 */
export function invite(
  context: ServiceContext,
  input: { email: string; name: string; roles: readonly Role[] },
): Promise<void> {
  const email = input.email.toLowerCase();
  return actOnWorkshop(context, "people.manage", "people.invite", async ({ tx, workshop, at }) => {
    const personId = await personWithMail(tx, email, input.name, at);
    const [member] = await tx
      .select({ role: memberships.role })
      .from(memberships)
      .where(and(eq(memberships.workshopId, workshop.id), eq(memberships.personId, personId)))
      .limit(1);
    if (member)
      throw new InvalidInputError(
        "email",
        "This person is in the workshop already. Change their roles instead.",
      );
    await spend(tx, workshop.id, personId, at);
    const token = await issue(context, tx, { personId, email, toName: input.name, roles: input.roles, at });
    return { result: undefined, detail: { invitation: token, person: personId, roles: input.roles } };
  });
}

/** Sends an invitation again, with a new link and a new week; the old link ends. @throws NotFoundError */
export function resendInvitation(context: ServiceContext, invitationId: number): Promise<void> {
  return actOnWorkshop(context, "people.manage", "people.reinvite", async ({ tx, workshop, at }) => {
    const old = await openInvitation(tx, workshop.id, invitationId);
    const [person] = await tx.select().from(people).where(eq(people.id, old.personId));
    if (!person) throw new NotFoundError("The invitation");
    await spend(tx, workshop.id, old.personId, at);
    const token = await issue(context, tx, {
      personId: old.personId,
      email: person.email,
      // The name of somebody who belongs elsewhere is not ours to use before they come.
      toName: person.passwordHash === null ? person.name : "there",
      roles: old.roles,
      at,
    });
    return { result: undefined, detail: { invitation: token, person: old.personId, roles: old.roles } };
  });
}

/** Takes an invitation back. @throws NotFoundError when it was accepted or cancelled already */
export function cancelInvitation(context: ServiceContext, invitationId: number): Promise<void> {
  return actOnWorkshop(context, "people.manage", "people.uninvite", async ({ tx, workshop, at }) => {
    const old = await openInvitation(tx, workshop.id, invitationId);
    await spend(tx, workshop.id, old.personId, at);
    return { result: undefined, detail: { invitation: old.id, person: old.personId } };
  });
}

/** Invitations that were neither accepted nor cancelled, expired ones too; by mail only, see {@link invite}. */
export async function listInvitations({ db, workshop, now }: ServiceContext) {
  const rows = await db
    .select({
      id: tokens.id,
      email: people.email,
      roles: tokens.roles,
      createdAt: tokens.createdAt,
      expiresAt: tokens.expiresAt,
    })
    .from(tokens)
    .innerJoin(people, eq(people.id, tokens.personId))
    .where(and(eq(tokens.workshopId, workshop.id), eq(tokens.purpose, "invitation"), isNull(tokens.usedAt)))
    .orderBy(desc(tokens.createdAt), asc(people.email));
  return rows.map((row) => ({ ...row, roles: row.roles ?? [], expired: row.expiresAt <= now() }));
}

export interface OpenInvitation {
  workshop: { slug: string; name: string };
  email: string;
  /** As the steward wrote it, for somebody who is new; else empty. */
  name: string;
  personId: number;
  roles: Role[];
  /** Whether the person still has to choose a password. */
  isNew: boolean;
}

/** The invitation behind a link; null when it is unknown, used, cancelled or expired. */
export async function findInvitation(db: Reader, secret: string, now: Date): Promise<OpenInvitation | null> {
  const [row] = await db
    .select({ token: tokens, person: people, slug: workshops.slug, workshopName: workshops.name })
    .from(tokens)
    .innerJoin(people, eq(people.id, tokens.personId))
    .innerJoin(workshops, eq(workshops.id, tokens.workshopId))
    .where(stillCounts(secret, now));
  if (!row) return null;
  const isNew = row.person.passwordHash === null;
  return {
    workshop: { slug: row.slug, name: row.workshopName },
    email: row.person.email,
    name: isNew ? row.person.name : "",
    personId: row.person.id,
    roles: row.token.roles ?? [],
    isNew,
  };
}

export type Acceptance =
  /** Somebody new, who now gets a name and a password. */
  | { kind: "new"; name: string; password: string }
  /** Somebody who has a password, and is signed in or gives it now. */
  | { kind: "signed-in"; person: SignedInPerson }
  | { kind: "password"; password: string; address: string };

/**
 * Accepts an invitation: the person gets its roles, and it is spent.
 * @returns the person, to be signed in
 * @throws AuthenticationError when the link no longer counts or the password is wrong, ThrottledError, ConflictError
 */
export async function acceptInvitation(
  db: Database,
  secret: string,
  acceptance: Acceptance,
  now: Date,
): Promise<{ personId: number; workshop: { slug: string; name: string } }> {
  const open = await findInvitation(db, secret, now);
  if (!open) throw new AuthenticationError(SPENT);
  if (acceptance.kind === "signed-in" && acceptance.person.id !== open.personId) {
    throw new AuthenticationError("This invitation was sent to somebody else.");
  }
  if (acceptance.kind === "password") {
    await authenticate(
      db,
      { email: open.email, password: acceptance.password, address: acceptance.address },
      now,
    );
  }
  const passwordHash = acceptance.kind === "new" ? await hashPassword(acceptance.password) : null;
  await inTransaction(db, async (tx) => {
    const [token] = await tx.select().from(tokens).where(stillCounts(secret, now)).for("update");
    if (!token || token.workshopId === null) throw new AuthenticationError(SPENT);
    const workshopId = token.workshopId;
    if (acceptance.kind === "new") {
      const [answer] = await tx
        .update(people)
        .set({ name: acceptance.name, passwordHash })
        .where(and(eq(people.id, token.personId), isNull(people.passwordHash)));
      if (answer.affectedRows !== 1) {
        throw new ConflictError("You have chosen a password in the meantime. Sign in with it to join.");
      }
    }
    const granted = allRoles.filter((role) => token.roles?.includes(role));
    await tx
      .insert(memberships)
      .ignore()
      .values(granted.map((role) => ({ workshopId, personId: token.personId, role, grantedAt: now })));
    await spend(tx, workshopId, token.personId, now);
    await appendEntry(tx, {
      workshopId,
      at: now,
      actorId: token.personId,
      act: "people.join",
      detail: { invitation: token.id, roles: granted },
    });
  });
  return { personId: open.personId, workshop: open.workshop };
}

const SPENT =
  "This invitation was used or cancelled, or is older than a week. Ask the workshop for a new one.";

function stillCounts(secret: string, now: Date) {
  return and(
    eq(tokens.hash, hashSecret(secret)),
    eq(tokens.purpose, "invitation"),
    isNull(tokens.usedAt),
    gt(tokens.expiresAt, now),
  );
}

/** Finds the person with that mail or makes one who has no password yet. */
async function personWithMail(tx: Transaction, email: string, name: string, at: Date): Promise<number> {
  const [known] = await tx.select().from(people).where(eq(people.email, email)).for("update");
  if (known) {
    // Nobody has come under this row yet, so the steward who invites last may correct the name.
    if (known.passwordHash === null) await tx.update(people).set({ name }).where(eq(people.id, known.id));
    return known.id;
  }
  const [made] = await tx.insert(people).values({ email, name, createdAt: at }).$returningId();
  if (!made) throw new Error("The person got no id.");
  return made.id;
}

async function openInvitation(tx: Transaction, workshopId: number, invitationId: number) {
  const [row] = await tx
    .select()
    .from(tokens)
    .where(
      and(
        eq(tokens.id, invitationId),
        eq(tokens.workshopId, workshopId),
        eq(tokens.purpose, "invitation"),
        isNull(tokens.usedAt),
      ),
    )
    .for("update");
  if (!row) throw new NotFoundError("The invitation");
  return { id: row.id, personId: row.personId, roles: row.roles ?? [] };
}

/** Ends every open invitation of that person to the workshop. */
async function spend(tx: Transaction, workshopId: number, personId: number, at: Date): Promise<void> {
  await tx
    .update(tokens)
    .set({ usedAt: at })
    .where(
      and(
        eq(tokens.workshopId, workshopId),
        eq(tokens.personId, personId),
        eq(tokens.purpose, "invitation"),
        isNull(tokens.usedAt),
      ),
    );
}

async function issue(
  context: ServiceContext,
  tx: Transaction,
  input: { personId: number; email: string; toName: string; roles: readonly Role[]; at: Date },
): Promise<number> {
  const secret = newSecret();
  const [token] = await tx
    .insert(tokens)
    .values({
      hash: hashSecret(secret),
      purpose: "invitation",
      personId: input.personId,
      workshopId: context.workshop.id,
      roles: [...input.roles],
      createdById: context.person.id,
      createdAt: input.at,
      expiresAt: new Date(input.at.getTime() + INVITATION_MS),
    })
    .$returningId();
  if (!token) throw new Error("The invitation got no id.");
  const asWhat = new Intl.ListFormat("en-GB").format(
    input.roles.map((role) => roleTitles[role].toLowerCase()),
  );
  await enqueueMails(tx, [
    {
      workshopId: context.workshop.id,
      recipient: input.email,
      toName: input.toName,
      at: input.at,
      subject: `Invitation to ${context.workshop.name}`,
      paragraphs: [
        `${context.person.name} invites you to ${context.workshop.name} on Mainsgate, as ${asWhat}.`,
        `The link works once, within ${INVITATION_DAYS} days. If you expected no invitation, do nothing.`,
      ],
      link: { label: "Accept the invitation", href: `${context.appUrl}/invitation/${secret}` },
      from: mailFrom(context),
    },
  ]);
  return token.id;
}
