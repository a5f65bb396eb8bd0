import { eq } from "drizzle-orm";
import { tables } from "~/db/client.server";
import { findRuleSet } from "~/engine/rule-set";
import type { ServiceContext } from "~/services/context.server";
import { ConflictError, InvalidInputError } from "~/services/errors";
import { actOnWorkshop } from "~/services/workshop-act.server";

const { workshops } = tables;

export interface WorkshopSettings {
  name: string;
  timeZone: string;
  ruleSetKey: string;
  ruleSetVersion: string;
  accuracyPolicy: "rect" | "maker-k2";
  recheckMonths: number;
}

/** Whether this machine knows the IANA time zone. */
function isTimeZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat("en", { timeZone: name });
    return true;
  } catch {
    return false;
  }
}

/**
 * Changes a workshop's settings. Units that were submitted keep the rule set pinned in their revision.
 * `expected` are the settings that the form showed.
 *
 * @throws InvalidInputError, ConflictError when somebody changed them meanwhile
 */
export function changeSettings(
  context: ServiceContext,
  { expected, settings }: { expected: WorkshopSettings; settings: WorkshopSettings },
): Promise<void> {
  return actOnWorkshop(context, "workshop.manage", "workshop.settings", async ({ tx, workshop }) => {
    if (!isTimeZone(settings.timeZone))
      throw new InvalidInputError("timeZone", "There is no such time zone.");
    if (!findRuleSet(settings.ruleSetKey, settings.ruleSetVersion)) {
      throw new InvalidInputError("ruleSet", "There is no such rule set.");
    }
    if (changedMembers(settingsOf(workshop), expected).length > 0) {
      throw new ConflictError("Somebody else changed the settings in the meantime. Look at them again.");
    }
    const changed = changedMembers(settingsOf(workshop), settings);
    if (changed.length === 0) return { result: undefined, unchanged: true };
    await tx.update(workshops).set(settings).where(eq(workshops.id, workshop.id));
    return {
      result: undefined,
      detail: Object.fromEntries(changed.map((name) => [name, [settingsOf(workshop)[name], settings[name]]])),
    };
  });
}

/** The settings within a workshop's row or context. */
export function settingsOf(workshop: WorkshopSettings): WorkshopSettings {
  const { name, timeZone, ruleSetKey, ruleSetVersion, accuracyPolicy, recheckMonths } = workshop;
  return { name, timeZone, ruleSetKey, ruleSetVersion, accuracyPolicy, recheckMonths };
}

const members = [
  "name",
  "timeZone",
  "ruleSetKey",
  "ruleSetVersion",
  "accuracyPolicy",
  "recheckMonths",
] as const;

function changedMembers(before: WorkshopSettings, after: WorkshopSettings): (typeof members)[number][] {
  return members.filter((member) => before[member] !== after[member]);
}
