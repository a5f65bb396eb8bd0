import { describe, expect, test } from "vitest";
import { energyMapSchema, type EnergyMap } from "~/engine/energy-map";
import { mapOf, part, wire } from "~/engine/map-builder";
import { mapProblems } from "~/engine/problems";
import {
  asExample,
  editMap,
  type EditorAction,
  type EditorState,
  nextElementId,
  startEditing,
  suggestCircuit,
} from "./map-editor-state";

const map = (): EnergyMap =>
  mapOf(
    [
      part("mains-inlet", "X1", "Inlet"),
      part("fuse", "F1", "Fuse"),
      part("switch", "S1", "Relay", { actuator: "relay", coilFedBy: "X1" }),
    ],
    [wire("W1", "X1.L", "F1.1", "mains", 1, 0.2), wire("W2", "F1.2", "S1.1a", "mains", 1, 0.2)],
  );

const run = (...actions: EditorAction[]): EditorState => actions.reduce(editMap, startEditing(map()));

describe("editing a map", () => {
  test("never leaves the schema, whatever is typed", () => {
    const { map: edited } = run(
      { type: "change-element", id: "F1", field: "ratingAmps", value: -3 },
      { type: "change-element", id: "F1", field: "ratingAmps", value: "three" },
      { type: "change-element", id: "F1", field: "noSuchField", value: 3 },
    );
    expect(edited).toEqual(map());
    expect(energyMapSchema.safeParse(edited).success).toBe(true);
  });

  test("a new element knows nothing yet, under the first free id of its kind", () => {
    expect(nextElementId(map(), "fuse")).toBe("F2");
    const { map: edited } = run({ type: "add-element", kind: "fuse", id: "F2" });
    expect(edited.elements.at(-1)).toMatchObject({
      id: "F2",
      ratingAmps: null,
      breakingAmps: null,
      acVolts: null,
    });
  });

  test("renaming an element takes its connections and its coil's reference along", () => {
    const { map: edited } = run({ type: "rename", subject: "element", id: "X1", to: "XM" });
    expect(edited.conductors[0]?.from).toEqual({ element: "XM", terminal: "L" });
    expect(edited.elements[2]).toMatchObject({ id: "S1", coilFedBy: "XM" });
  });

  test("an id that is taken, also by a connection, is no new name", () => {
    expect(run({ type: "rename", subject: "element", id: "F1", to: "W2" }).map).toEqual(map());
  });

  test("removing an element takes its connections; one step back brings all of it again, in place", () => {
    const removed = run({ type: "remove", subject: "element", id: "F1" });
    expect(removed.map.conductors).toEqual([]);
    expect(removed.past.at(-1)?.what).toBe("F1 and its 2 connections removed");
    expect(editMap(removed, { type: "undo" }).map).toEqual(map());
  });

  test("typing in one field is one step back, typing in the next one another", () => {
    const state = run(
      { type: "change-element", id: "F1", field: "ratingAmps", value: 3 },
      { type: "change-element", id: "F1", field: "ratingAmps", value: 3.15 },
      { type: "change-element", id: "F1", field: "acVolts", value: 250 },
    );
    const once = editMap(state, { type: "undo" });
    expect(once.map.elements[1]).toMatchObject({ ratingAmps: 3.15, acVolts: null });
    expect(editMap(once, { type: "undo" }).map).toEqual(map());
    expect(editMap(once, { type: "redo" }).map).toEqual(state.map);
  });

  test("a new change after a step back leaves no way forward", () => {
    const back = editMap(run({ type: "remove", subject: "conductor", id: "W1" }), { type: "undo" });
    const changed = editMap(back, { type: "change-element", id: "F1", field: "label", value: "Main fuse" });
    expect(changed.future).toEqual([]);
  });

  test("the ends of a list are its ends", () => {
    const same = run({ type: "move", subject: "element", id: "X1", by: -1 });
    expect(same.past).toEqual([]);
    const moved = run({ type: "move", subject: "element", id: "X1", by: 1 });
    expect(moved.map.elements.map(({ id }) => id)).toEqual(["F1", "X1", "S1"]);
  });

  test("a copy stands after its original, under its own id", () => {
    const { map: edited } = run({ type: "duplicate", subject: "conductor", id: "W1", as: "W3" });
    expect(edited.conductors.map(({ id }) => id)).toEqual(["W1", "W3", "W2"]);
  });

  test("does not change the map it was given", () => {
    const given = map();
    const frozen = structuredClone(given);
    editMap(startEditing(given), { type: "remove", subject: "element", id: "F1" });
    expect(given).toEqual(frozen);
  });
});

describe("the circuit that two terminals suggest", () => {
  test("follows the terminals' roles, earth first", () => {
    const end = (element: string, terminal: string) => ({ element, terminal });
    expect(suggestCircuit(map(), end("X1", "L"), end("F1", "1"))).toBe("mains");
    expect(suggestCircuit(map(), end("X1", "PE"), end("F1", "1"))).toBe("earth");
    expect(suggestCircuit(map(), end("F1", "2"), end("S1", "1a"))).toBe("mains");
  });

  test("stays open where nothing tells", () => {
    const bare = mapOf([part("fuse", "F1", ""), part("fuse", "F2", "")], []);
    expect(
      suggestCircuit(bare, { element: "F1", terminal: "1" }, { element: "F2", terminal: "1" }),
    ).toBeNull();
  });
});

describe("a starter's example figures", () => {
  const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "II" } as const;
  const marked = (state: EditorState) =>
    state.map.elements.filter(({ example }) => example).map(({ id }) => id);
  const from = (...actions: EditorAction[]) => actions.reduce(editMap, startEditing(asExample(map())));

  test("stand in the way of submitting until each is confirmed or changed", () => {
    expect(marked(from())).toEqual(["X1", "F1", "S1"]);
    expect(energyMapSchema.safeParse(from().map).success).toBe(true);
    const state = from(
      { type: "confirm-figures", id: "X1" },
      { type: "change-element", id: "S1", field: "gapMm", value: 3 },
      { type: "change-element", id: "F1", field: "label", value: "Fuse" },
    );
    expect(marked(state)).toEqual(["F1"]);
    const about = mapProblems(state.map, facts).filter(({ text }) => text.includes("example figures"));
    expect(about).toEqual([
      {
        subject: { kind: "element", id: "F1" },
        field: null,
        text: "F1 (Fuse) still has the starter's example figures: enter or confirm those of the part itself.",
        blocking: true,
      },
    ]);
  });

  test("can be confirmed all at once, which is one step back", () => {
    const state = from({ type: "confirm-figures", id: null });
    expect(state.map).toEqual(map());
    expect(state.past.at(-1)?.what).toBe("All figures confirmed");
    expect(marked(editMap(state, { type: "undo" }))).toEqual(["X1", "F1", "S1"]);
  });

  test("a value that is out of bounds, and one that confirms nothing, change nothing", () => {
    const state = from();
    expect(editMap(state, { type: "change-element", id: "F1", field: "ratingAmps", value: -1 })).toBe(state);
    const own = startEditing(map());
    expect(editMap(own, { type: "confirm-figures", id: null })).toBe(own);
  });
});
