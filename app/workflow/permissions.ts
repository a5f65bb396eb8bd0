import { type Role, roleTitles } from "./roles";
import { stateTitles, type UnitState } from "./states";

/** How the acting person must stand to the unit. */
type Relation =
  /** built it */
  | "builder-of-it"
  /** neither builds it nor ever built on it */
  | "not-its-builder"
  /** holds it on the bench now, and never built on it */
  | "its-inspector"
  /** never built on it and never inspected it */
  | "independent";

interface Permission {
  roles: readonly Role[];
  states?: readonly UnitState[];
  relation?: Relation;
}

const everyone = ["builder", "inspector", "electrician", "archivist", "steward"] as const;

/**
 * The one table of who may do what, in which state, and how they must stand to the unit.
 * Routes, buttons, services, the API and the tests all read it through {@link decide}.
 */
export const permissions = {
  "workshop.visit": { roles: everyone },
  "unit.list": { roles: everyone },
  "unit.read": { roles: everyone },
  "unit.create": { roles: ["builder"] },
  "unit.edit": { roles: ["builder"], states: ["draft", "sent_back"], relation: "builder-of-it" },
  "unit.discard": { roles: ["builder"], states: ["draft"], relation: "builder-of-it" },
  "unit.submit": { roles: ["builder"], states: ["draft", "sent_back"], relation: "builder-of-it" },
  /** To begin a new version of it; it stays in force until that one is signed. */
  "unit.succeed": {
    roles: ["builder"],
    states: ["signed", "refused", "withdrawn"],
    relation: "builder-of-it",
  },
  /** To give it to another builder, when its own has left. */
  "unit.hand-over": { roles: ["steward"], states: ["draft", "sent_back"] },
  "finding.answer": { roles: ["builder"], states: ["sent_back"], relation: "builder-of-it" },
  "map.evaluate": { roles: everyone },
  "bench.queue": { roles: ["inspector", "steward"] },
  "bench.take": { roles: ["inspector"], states: ["submitted"], relation: "not-its-builder" },
  "bench.read": { roles: ["inspector", "electrician", "steward"] },
  "bench.work": { roles: ["inspector"], states: ["on_bench"], relation: "its-inspector" },
  "bench.release": { roles: ["inspector"], states: ["on_bench"], relation: "its-inspector" },
  /** To put it back into the queue for an inspector who is absent. */
  "bench.reclaim": { roles: ["steward"], states: ["on_bench"] },
  "bench.finish": { roles: ["inspector"], states: ["on_bench"], relation: "its-inspector" },
  "bench.send-back": { roles: ["inspector"], states: ["on_bench"], relation: "its-inspector" },
  "signing.queue": { roles: ["electrician", "steward"] },
  /** To send a decision at all, whatever the unit's state has become meanwhile: what it may do is asked again under the lock. */
  "signing.decide": { roles: ["electrician"] },
  "signing.review": { roles: ["electrician"], states: ["awaiting_signature"] },
  "signing.sign": { roles: ["electrician"], states: ["awaiting_signature"], relation: "independent" },
  "signing.refuse": { roles: ["electrician"], states: ["awaiting_signature"], relation: "independent" },
  "signing.send-back": { roles: ["electrician"], states: ["awaiting_signature"], relation: "independent" },
  "record.withdraw": { roles: ["electrician"], states: ["signed"] },
  /** Whoever signs a new version thereby ends the signature on the one before it. */
  "record.supersede": { roles: ["electrician"], states: ["signed"] },
  "archive.search": { roles: ["archivist", "electrician", "inspector", "steward"] },
  "archive.read": { roles: everyone, states: ["signed", "refused", "withdrawn", "superseded"] },
  "trail.read": { roles: ["archivist", "electrician", "steward"] },
  "people.read": { roles: ["steward"] },
  "people.manage": { roles: ["steward"] },
  "licences.manage": { roles: ["steward"] },
  "instruments.read": { roles: ["inspector", "electrician", "archivist", "steward"] },
  "instruments.manage": { roles: ["steward"] },
  "workshop.manage": { roles: ["steward"] },
} as const satisfies Record<string, Permission>;

export type Action = keyof typeof permissions;

/** What {@link decide} must know of a unit. */
export interface UnitStanding {
  state: UnitState;
  builderId: number;
  /** Everybody who built on it before it was handed to its builder of now. */
  formerBuilderIds: readonly number[];
  inspectorId: number | null;
  /** Everybody who ever took it on the bench. */
  inspectorIds: readonly number[];
}

export type Decision = { allowed: true } | { allowed: false; reason: string };

/**
 * Decides whether a person holding `held` roles may perform `action`, on `unit` where the action concerns one.
 * An action whose row names states or a relation is denied when no unit is given.
 */
export function decide(
  action: Action,
  person: { id: number; roles: readonly Role[] },
  unit?: UnitStanding,
): Decision {
  const permission: Permission = permissions[action];
  if (!permission.roles.some((role) => person.roles.includes(role))) {
    return deny(
      `This needs the role ${orList(permission.roles.map((role) => roleTitles[role].toLowerCase()))}.`,
    );
  }
  if (!permission.states && !permission.relation) return { allowed: true };
  if (!unit) return deny("This concerns one unit, and none was named.");
  if (permission.states && !permission.states.includes(unit.state)) {
    const needed = orList(permission.states.map((state) => `“${stateTitles[state]}”`));
    return deny(`The unit is “${stateTitles[unit.state]}”; this is possible only while it is ${needed}.`);
  }
  const objection = permission.relation && objectionTo(permission.relation, person.id, unit);
  return objection ? deny(objection) : { allowed: true };
}

function objectionTo(relation: Relation, personId: number, unit: UnitStanding): string | null {
  const builtOnIt = unit.builderId === personId || unit.formerBuilderIds.includes(personId);
  switch (relation) {
    case "builder-of-it":
      return unit.builderId === personId ? null : "Only the person who built the unit may do this.";
    case "not-its-builder":
      return builtOnIt ? "You built this unit; somebody else must inspect it." : null;
    case "its-inspector":
      if (builtOnIt) return "You built this unit; somebody else must inspect it.";
      return unit.inspectorId === personId ? null : "Another inspector has this unit on the bench.";
    case "independent":
      if (builtOnIt) return "You built this unit; somebody else must decide on it.";
      return unit.inspectorIds.includes(personId)
        ? "You inspected this unit; somebody else must decide on it."
        : null;
  }
}

function deny(reason: string): Decision {
  return { allowed: false, reason };
}

function orList(words: string[]): string {
  return new Intl.ListFormat("en-GB", { type: "disjunction" }).format(words);
}
