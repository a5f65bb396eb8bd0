import { authorise } from "~/middleware/authorise.server";
import { problem } from "~/middleware/answers.server";
import { countQueues } from "~/services/bench/queue-counts.server";
import type { Route } from "./+types/queues";

/** GET: how many units wait, for the signed-in person and by state. */
export async function loader({ context }: Route.LoaderArgs) {
  const services = authorise(context, "workshop.visit");
  try {
    return Response.json(await countQueues(services), { headers: { "Cache-Control": "no-store" } });
  } catch (error) {
    return problem(error);
  }
}
