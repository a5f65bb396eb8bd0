import { database } from "~/services/database.server";
import { environment } from "~/environment.server";
import { tellStories } from "./stories";
import { seedWorkshop } from "./workshop";

const DAY = 86_400_000;
/** The workshop is as old as its oldest story, and a week more. */
const AGE_DAYS = 420;

/**
 * Fills an empty database with the demo workshop. Called once, when there is no workshop yet. The units' stories are
 * played through the services, with the clock set back, in the order in which they happened.
 */
export async function seedDemo(): Promise<void> {
  const db = database();
  const today = new Date();
  const start = new Date(today.getTime() - AGE_DAYS * DAY);
  const { workshop, steps } = await seedWorkshop(db, environment().APP_URL, start, today);
  const midnight = Math.floor(today.getTime() / DAY) * DAY;
  const acts = [...steps, ...tellStories(workshop)]
    .map(({ daysAgo, hour, act }) => ({ at: midnight - daysAgo * DAY + hour * 3_600_000, act }))
    .sort((a, b) => a.at - b.at);
  for (const { at, act } of acts) await act(new Date(Math.min(at, today.getTime())));
}
