import { and, asc, eq, inArray, isNull } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import { stateTitles, type UnitState } from "~/workflow/states";

const { units } = tables;

/** A unit that is a version of another. */
export interface VersionView {
  number: number;
  name: string;
  state: UnitState;
}

export interface Versions {
  /** The unit that this one is a new version of. */
  predecessor: VersionView | null;
  /** The new versions begun from this one, the oldest first; more than one where an earlier one was refused. */
  successors: VersionView[];
  /** Why no new version can be begun now, as a sentence. */
  obstacle: string | null;
}

interface Relative extends VersionView {
  id: number;
  predecessorId: number | null;
}

const inWork: readonly UnitState[] = ["draft", "submitted", "on_bench", "awaiting_signature", "sent_back"];

/** The versions before and after a unit, and whether another may be begun: one at a time in the whole family. */
export async function loadVersions(
  db: Reader,
  unit: { id: number; predecessorId: number | null },
): Promise<Versions> {
  const before = await listAncestors(db, unit.predecessorId);
  const after = await listDescendants(db, [unit.id]);
  const oldest = before.at(-1)?.id;
  const family = oldest === undefined ? after : await listDescendants(db, [oldest]);
  return {
    predecessor: before[0] ? view(before[0]) : null,
    successors: after.filter((one) => one.predecessorId === unit.id).map(view),
    obstacle: obstacleIn(
      family.filter(({ id }) => id !== unit.id),
      after,
    ),
  };
}

function obstacleIn(family: readonly Relative[], after: readonly Relative[]): string | null {
  const working = family.find(({ state }) => inWork.includes(state));
  if (working) {
    return `A new version is being worked on already: unit ${working.number}, “${working.name}”, now “${stateTitles[working.state]}”.`;
  }
  const newest = after.findLast(({ state }) => state === "signed" || state === "superseded");
  return newest
    ? `Unit ${newest.number}, “${newest.name}”, is its signed new version: begin the next one there.`
    : null;
}

function view({ number, name, state }: Relative): VersionView {
  return { number, name, state };
}

const columns = {
  id: units.id,
  number: units.number,
  name: units.name,
  state: units.state,
  predecessorId: units.predecessorId,
};

/** The version before, the one before that, and so on. */
async function listAncestors(db: Reader, predecessorId: number | null): Promise<Relative[]> {
  const found: Relative[] = [];
  for (let id = predecessorId; id !== null; id = found.at(-1)?.predecessorId ?? null) {
    const [row] = await db.select(columns).from(units).where(eq(units.id, id));
    if (!row) break;
    found.push(row);
  }
  return found;
}

/** Everything that was begun from these units, directly or not; discarded drafts left out. */
async function listDescendants(db: Reader, ids: readonly number[]): Promise<Relative[]> {
  const found: Relative[] = [];
  for (let level = [...ids]; level.length > 0;) {
    const rows = await db
      .select(columns)
      .from(units)
      .where(and(inArray(units.predecessorId, level), isNull(units.discardedAt)))
      .orderBy(asc(units.id));
    found.push(...rows);
    level = rows.map(({ id }) => id);
  }
  return found.sort((a, b) => a.id - b.id);
}
