import { and, asc, desc, eq } from "drizzle-orm";
import { isDuplicate, type Reader, tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import { InvalidInputError, NotFoundError } from "~/services/errors";
import { actOnWorkshop } from "~/services/workshop-act.server";
import type { LicenceTerms } from "~/workflow/licence-fit";

const { licences, memberships, people } = tables;

export interface LicenceView extends LicenceTerms {
  id: number;
  personId: number;
  /** As the licence itself says it. */
  holderName: string;
  revokedAt: Date | null;
}

export interface LicenceInput {
  personId: number;
  /** As the licence itself says it: this is the name that the holder signs with. */
  holderName: string;
  number: string;
  authority: string;
  validFrom: string;
  validTo: string;
  maxSupplyVolts: number;
  coversBatteries: boolean;
}

/** A person's licences recorded by one workshop, the one that lasts longest first. */
export async function licencesOf(db: Reader, workshopId: number, personId: number): Promise<LicenceView[]> {
  return (await selectLicences(db, workshopId, personId)).map(view);
}

/** The same, locked against a revocation until the transaction ends. */
export async function lockLicencesOf(
  db: Reader,
  workshopId: number,
  personId: number,
): Promise<LicenceView[]> {
  // MariaDB has no "for share", and drizzle no "lock in share mode".
  return (await selectLicences(db, workshopId, personId).for("update")).map(view);
}

function selectLicences(db: Reader, workshopId: number, personId: number) {
  return db
    .select()
    .from(licences)
    .where(and(eq(licences.workshopId, workshopId), eq(licences.personId, personId)))
    .orderBy(desc(licences.validTo), desc(licences.id));
}

/** All licences of the workshop with the accounts of their holders, by name. */
export async function listLicences({ db, workshop }: ServiceContext) {
  const rows = await db
    .select({ licence: licences, account: people.name })
    .from(licences)
    .innerJoin(people, eq(people.id, licences.personId))
    .where(eq(licences.workshopId, workshop.id))
    .orderBy(asc(people.name), desc(licences.validTo));
  return rows.map((row) => ({ ...view(row.licence), account: row.account }));
}

/** The workshop's electricians, who alone can hold a licence here. */
export function listElectricians({ db, workshop }: ServiceContext) {
  return db
    .select({ id: people.id, name: people.name })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(eq(memberships.workshopId, workshop.id), eq(memberships.role, "electrician")))
    .orderBy(asc(people.name));
}

/**
 * Records a licence. What was recorded is never edited, since signatures point to it: a renewed licence is a new row.
 * @throws InvalidInputError for a person who is no electrician here, or a licence that is recorded already
 */
export function addLicence(context: ServiceContext, input: LicenceInput): Promise<number> {
  return actOnWorkshop(context, "licences.manage", "licence.add", async ({ tx, workshop }) => {
    const [holder] = await tx
      .select({ role: memberships.role })
      .from(memberships)
      .where(
        and(
          eq(memberships.workshopId, workshop.id),
          eq(memberships.personId, input.personId),
          eq(memberships.role, "electrician"),
        ),
      );
    if (!holder) throw new InvalidInputError("personId", "Choose one of the workshop’s electricians.");
    try {
      const [row] = await tx
        .insert(licences)
        .values({ ...input, workshopId: workshop.id })
        .$returningId();
      if (!row) throw new Error("The licence got no id.");
      return { result: row.id, detail: { licence: row.id, person: input.personId } };
    } catch (error) {
      if (!isDuplicate(error)) throw error;
      throw new InvalidInputError(
        "number",
        "A licence with this number of this authority is recorded already.",
      );
    }
  });
}

/** Revokes a licence from now on; what was signed under it stays as it was. */
export function revokeLicence(context: ServiceContext, licenceId: number): Promise<void> {
  return actOnWorkshop(context, "licences.manage", "licence.revoke", async ({ tx, workshop, at }) => {
    const [row] = await tx
      .select()
      .from(licences)
      .where(and(eq(licences.id, licenceId), eq(licences.workshopId, workshop.id)))
      .for("update");
    if (!row) throw new NotFoundError("The licence");
    if (row.revokedAt) return { result: undefined, unchanged: true };
    await tx.update(licences).set({ revokedAt: at }).where(eq(licences.id, row.id));
    return { result: undefined, detail: { licence: row.id, person: row.personId } };
  });
}

function view({ workshopId: _, ...row }: typeof licences.$inferSelect): LicenceView {
  return { ...row, revoked: row.revokedAt !== null };
}
