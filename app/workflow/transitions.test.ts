import { describe, expect, test } from "vitest";
import { permissions } from "./permissions";
import { unitStates } from "./states";
import { transition, type TransitionName, transitions } from "./transitions";

const names = Object.keys(transitions) as TransitionName[];

describe("a unit's life", () => {
  test("is the one that the design draws", () => {
    const arrows = names.flatMap((name) =>
      transitions[name].from.map((from) => `${from} → ${transitions[name].to}`),
    );
    expect([...new Set(arrows)].sort()).toEqual(
      [
        "draft → submitted",
        "submitted → on_bench",
        "on_bench → submitted",
        "on_bench → awaiting_signature",
        "on_bench → sent_back",
        "awaiting_signature → sent_back",
        "awaiting_signature → signed",
        "awaiting_signature → refused",
        "sent_back → submitted",
        "signed → withdrawn",
        "signed → superseded",
      ].sort(),
    );
  });

  test("each transition starts only where its permission allows it", () => {
    for (const name of names) {
      const { action, from } = transitions[name];
      expect(permissions[action].states, name).toEqual(from);
    }
  });

  test("from any other state it is stale and leads nowhere", () => {
    for (const name of names) {
      const from: readonly string[] = transitions[name].from;
      for (const state of unitStates) {
        const outcome = transition(state, name);
        if (from.includes(state)) expect(outcome).toMatchObject({ ok: true, to: transitions[name].to });
        else expect(outcome).toEqual({ ok: false, reason: "stale", state });
      }
    }
  });

  test("every state is reached, and everybody hears of what ends a signature", () => {
    const reached: readonly string[] = names.map((name) => transitions[name].to);
    for (const state of unitStates.filter((one) => one !== "draft")) expect(reached).toContain(state);
    expect(transitions.withdraw.tells).toEqual(["builder", "inspector", "electricians"]);
  });

  test("a signature meets every guard of the design", () => {
    expect(transitions.sign.guards).toEqual(
      expect.arrayContaining([
        "checks-decided",
        "photos-present",
        "no-open-danger",
        "instruments-in-calibration",
        "licence-in-date",
        "licence-in-scope",
        "signer-authenticated",
        "signature-given",
      ]),
    );
  });
});
