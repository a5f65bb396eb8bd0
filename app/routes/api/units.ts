import { authorise } from "~/middleware/authorise.server";
import { dayIn } from "~/services/context.server";
import { listUnits, UNITS_PER_PAGE } from "~/services/units/list-units.server";
import { readUnitQuery } from "~/routes/units/unit-query";
import type { Route } from "./+types/units";

/** GET: the workshop's units, a page at a time, by the same parameters as the page with the list. */
export async function loader({ url, context }: Route.LoaderArgs) {
  const { db, person, workshop, now } = authorise(context, "unit.list");
  const query = readUnitQuery(url.searchParams);
  const { units, total, page } = await listUnits(db, {
    workshopId: workshop.id,
    today: dayIn(workshop.timeZone, now()),
    text: query.text,
    states: query.states,
    builderId: query.mine ? person.id : undefined,
    sort: query.sort,
    page: query.page,
  });
  return Response.json({ page, perPage: UNITS_PER_PAGE, total, units });
}
