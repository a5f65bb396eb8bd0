import { describe, expect, test } from "vitest";
import { type Action, decide, permissions, type UnitStanding } from "./permissions";
import { type Role, roles } from "./roles";
import { unitStates } from "./states";

const BUILDER = 1;
const INSPECTOR = 2;
const EARLIER_INSPECTOR = 3;
const STRANGER = 4;
const FORMER_BUILDER = 5;

function unit(changes: Partial<UnitStanding> = {}): UnitStanding {
  return {
    state: "draft",
    builderId: BUILDER,
    formerBuilderIds: [FORMER_BUILDER],
    inspectorId: INSPECTOR,
    inspectorIds: [INSPECTOR, EARLIER_INSPECTOR],
    ...changes,
  };
}

const may = (action: Action, personId: number, held: readonly Role[], on?: UnitStanding) =>
  decide(action, { id: personId, roles: held }, on).allowed;

describe("the permission table", () => {
  test("gives nothing to somebody without a role", () => {
    for (const action of Object.keys(permissions) as Action[]) {
      for (const state of unitStates) expect(may(action, STRANGER, [], unit({ state }))).toBe(false);
    }
  });

  test("denies, whole: every action that names a state is refused in every other state, to everybody", () => {
    for (const [action, row] of Object.entries(permissions) as [Action, { states?: readonly string[] }][]) {
      if (!row.states) continue;
      for (const state of unitStates.filter((candidate) => !row.states?.includes(candidate))) {
        for (const person of [BUILDER, INSPECTOR, EARLIER_INSPECTOR, STRANGER]) {
          expect(may(action, person, roles, unit({ state })), `${action} in ${state}`).toBe(false);
        }
      }
    }
  });

  test("a relation or a state is never presumed: without the unit such actions are refused", () => {
    expect(may("unit.edit", BUILDER, ["builder"])).toBe(false);
    expect(may("signing.sign", STRANGER, ["electrician"])).toBe(false);
    expect(may("unit.create", BUILDER, ["builder"])).toBe(true);
  });

  test("nobody inspects what they built, though they hold both roles", () => {
    const submitted = unit({ state: "submitted" });
    expect(may("bench.take", BUILDER, ["builder", "inspector"], submitted)).toBe(false);
    expect(may("bench.take", STRANGER, ["inspector"], submitted)).toBe(true);
    for (const person of [BUILDER, FORMER_BUILDER]) {
      const own = unit({ state: "on_bench", inspectorId: person });
      expect(may("bench.work", person, ["inspector"], own)).toBe(false);
    }
    expect(may("bench.take", FORMER_BUILDER, ["inspector"], submitted)).toBe(false);
  });

  test("only the inspector who has it on the bench works it", () => {
    const onBench = unit({ state: "on_bench" });
    expect(may("bench.work", INSPECTOR, ["inspector"], onBench)).toBe(true);
    expect(may("bench.work", EARLIER_INSPECTOR, ["inspector"], onBench)).toBe(false);
    expect(may("bench.finish", STRANGER, ["inspector"], onBench)).toBe(false);
  });

  test("nobody signs, refuses or sends back what they built or ever inspected", () => {
    const waiting = unit({ state: "awaiting_signature" });
    for (const action of ["signing.sign", "signing.refuse", "signing.send-back"] as const) {
      expect(may(action, STRANGER, ["electrician"], waiting)).toBe(true);
      for (const person of [BUILDER, FORMER_BUILDER, INSPECTOR, EARLIER_INSPECTOR]) {
        expect(may(action, person, roles, waiting), `${action} by ${person}`).toBe(false);
      }
    }
  });

  test("whoever built on it before it was handed on can neither edit it nor begin a new version", () => {
    expect(may("unit.edit", FORMER_BUILDER, ["builder"], unit())).toBe(false);
    for (const state of ["signed", "refused", "withdrawn"] as const) {
      expect(may("unit.succeed", FORMER_BUILDER, ["builder"], unit({ state }))).toBe(false);
      expect(may("unit.succeed", BUILDER, ["builder"], unit({ state }))).toBe(true);
    }
    expect(may("unit.succeed", BUILDER, ["builder"], unit({ state: "superseded" }))).toBe(false);
  });

  test("a steward moves on what is stuck: from an absent inspector's bench, from a builder who left", () => {
    expect(may("bench.reclaim", STRANGER, ["steward"], unit({ state: "on_bench" }))).toBe(true);
    expect(may("bench.reclaim", INSPECTOR, ["inspector"], unit({ state: "on_bench" }))).toBe(false);
    expect(may("unit.hand-over", STRANGER, ["steward"], unit({ state: "sent_back" }))).toBe(true);
    expect(may("unit.hand-over", BUILDER, ["builder"], unit({ state: "sent_back" }))).toBe(false);
  });

  test("tells why", () => {
    const answer = decide(
      "signing.sign",
      { id: 9, roles: ["builder"] },
      unit({ state: "awaiting_signature" }),
    );
    expect(answer).toEqual({ allowed: false, reason: "This needs the role electrician." });
    expect(decide("unit.edit", { id: BUILDER, roles: ["builder"] }, unit({ state: "signed" }))).toEqual({
      allowed: false,
      reason: "The unit is “Signed”; this is possible only while it is “Draft” or “Sent back”.",
    });
  });
});
