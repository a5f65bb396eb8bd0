import { and, count, eq, isNull, ne, notExists, sql } from "drizzle-orm";
import { tables } from "~/db/client.server";
import type { ServiceContext } from "~/services/context.server";
import type { UnitState } from "~/workflow/states";

const { benchTurns, formerBuilders, units } = tables;

export interface QueueCounts {
  /** What waits for the signed-in person, whichever roles they hold; nought where they lack the role. */
  yours: {
    /** Submitted units that they may take on the bench. */
    toInspect: number;
    onBench: number;
    /** Awaiting a signature that they may give: neither built nor ever inspected by them. */
    toSign: number;
    sentBack: number;
    drafts: number;
  };
  /** All units of the workshop by state. */
  states: Record<UnitState, number>;
}

/** How many units wait, for the badges of the navigation and the overview. */
export async function countQueues({ db, workshop, person }: ServiceContext): Promise<QueueCounts> {
  const here = and(eq(units.workshopId, workshop.id), isNull(units.discardedAt));
  const notBuilt = and(
    ne(units.builderId, person.id),
    notExists(
      db
        .select({ one: sql`1` })
        .from(formerBuilders)
        .where(and(eq(formerBuilders.unitId, units.id), eq(formerBuilders.personId, person.id))),
    ),
  );
  const neverInspected = notExists(
    db
      .select({ one: sql`1` })
      .from(benchTurns)
      .where(and(eq(benchTurns.unitId, units.id), eq(benchTurns.inspectorId, person.id))),
  );
  const built = eq(units.builderId, person.id);
  const isInspector = workshop.roles.includes("inspector");
  const isElectrician = workshop.roles.includes("electrician");
  const isBuilder = workshop.roles.includes("builder");
  const when = (holds: boolean, ...conditions: Parameters<typeof and>) =>
    holds
      ? sql<number>`sum(case when ${and(...conditions)} then 1 else 0 end)`.mapWith(Number)
      : sql<number>`0`.mapWith(Number);

  const [yours] = await db
    .select({
      toInspect: when(isInspector, eq(units.state, "submitted"), notBuilt),
      onBench: when(isInspector, eq(units.state, "on_bench"), eq(units.inspectorId, person.id)),
      toSign: when(isElectrician, eq(units.state, "awaiting_signature"), notBuilt, neverInspected),
      sentBack: when(isBuilder, eq(units.state, "sent_back"), built),
      drafts: when(isBuilder, eq(units.state, "draft"), built),
    })
    .from(units)
    .where(here);
  const byState = await db
    .select({ state: units.state, units: count() })
    .from(units)
    .where(here)
    .groupBy(units.state);
  const inState = (state: UnitState) => byState.find((row) => row.state === state)?.units ?? 0;
  return {
    yours: {
      toInspect: yours?.toInspect ?? 0,
      onBench: yours?.onBench ?? 0,
      toSign: yours?.toSign ?? 0,
      sentBack: yours?.sentBack ?? 0,
      drafts: yours?.drafts ?? 0,
    },
    states: {
      draft: inState("draft"),
      submitted: inState("submitted"),
      on_bench: inState("on_bench"),
      awaiting_signature: inState("awaiting_signature"),
      sent_back: inState("sent_back"),
      signed: inState("signed"),
      refused: inState("refused"),
      withdrawn: inState("withdrawn"),
      superseded: inState("superseded"),
    },
  };
}
