import { desc, inArray } from "drizzle-orm";
import { type Reader, tables } from "~/db/client.server";
import { type UnitState, validity, type Validity } from "~/workflow/states";

const { decisions } = tables;

/** How the signature of a signed unit stands on a day: what its badge must tell besides "signed". */
export interface Standing {
  validity: Validity["kind"];
  /** It was signed although a check fails. */
  departures: boolean;
}

/**
 * How the signed ones among some units stand; units in other states are not in the answer.
 *
 * @param today YYYY-MM-DD in the workshop's time zone
 */
export async function standingsOf(
  db: Reader,
  rows: readonly { id: number; state: UnitState }[],
  today: string,
): Promise<Map<number, Standing>> {
  const signed = rows.filter(({ state }) => state === "signed");
  if (signed.length === 0) return new Map();
  const found = await db
    .select({
      unitId: decisions.unitId,
      departures: decisions.departures,
      recheckOn: decisions.recheckOn,
    })
    .from(decisions)
    .where(
      inArray(
        decisions.unitId,
        signed.map(({ id }) => id),
      ),
    )
    .orderBy(desc(decisions.id));
  return new Map(
    signed.map(({ id, state }) => {
      const latest = found.find(({ unitId }) => unitId === id);
      return [
        id,
        {
          validity: validity(state, latest?.recheckOn ?? null, today).kind,
          departures: latest !== undefined && latest.departures !== null,
        },
      ];
    }),
  );
}

/** The same for one unit; null when it isn't signed. */
export async function standingOf(
  db: Reader,
  unit: { id: number; state: UnitState },
  today: string,
): Promise<Standing | null> {
  return (await standingsOf(db, [unit], today)).get(unit.id) ?? null;
}
