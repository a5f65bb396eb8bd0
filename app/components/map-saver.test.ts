import { afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import { emptyMap, type EnergyMap } from "~/engine/energy-map";
import { mapOf, part } from "~/engine/map-builder";
import { createMapSaver, type PutAnswer, type SaveState } from "./map-saver";

const mapNamed = (label: string): EnergyMap => mapOf([part("fuse", "F1", label)], []);

function saverWith(...answers: PutAnswer[]) {
  const states: SaveState[] = [];
  const put = vi.fn(async (_map: EnergyMap, edition: number): Promise<PutAnswer> => {
    return answers.shift() ?? { kind: "saved", edition: edition + 1, at: "2026-05-04T09:00:00.000Z" };
  });
  const saver = createMapSaver({ edition: 4, put, onState: (state) => states.push(state) });
  return { saver, put, kinds: () => states.map((state) => state.kind), last: () => states.at(-1) };
}

beforeEach(() => void vi.useFakeTimers());
afterEach(() => void vi.useRealTimers());

describe("saving a draft while it is typed", () => {
  test("saves the newest map once the typing pauses, and goes on from the new edition", async () => {
    const { saver, put, kinds } = saverWith();
    for (const label of ["a", "ab", "abc"]) saver.change(mapNamed(label));
    await vi.advanceTimersByTimeAsync(1_000);
    expect(put.mock.calls).toEqual([[mapNamed("abc"), 4]]);
    expect(kinds().at(-1)).toBe("saved");
    saver.change(mapNamed("abcd"));
    await vi.advanceTimersByTimeAsync(1_000);
    expect(put).toHaveBeenLastCalledWith(mapNamed("abcd"), 5);
  });

  test("says that it isn't saved, tries again with growing pauses, and sends what was typed meanwhile", async () => {
    const away: PutAnswer = { kind: "later", message: "away" };
    const { saver, put, last } = saverWith(away, away);
    saver.change(mapNamed("a"));
    await vi.advanceTimersByTimeAsync(1_000);
    expect(last()).toEqual({ kind: "retrying", message: "away" });
    saver.change(mapNamed("b"));
    expect(saver.pending()).toEqual({ map: mapNamed("b"), edition: 4 });
    await vi.advanceTimersByTimeAsync(2_000);
    expect(put).toHaveBeenCalledTimes(2);
    await vi.advanceTimersByTimeAsync(3_700);
    expect(put).toHaveBeenCalledTimes(2);
    await vi.advanceTimersByTimeAsync(200);
    expect(put).toHaveBeenLastCalledWith(mapNamed("b"), 4);
    expect(last()?.kind).toBe("saved");
    expect(saver.pending()).toBeNull();
  });

  test("a request that throws counts as the server being away, and loses nothing", async () => {
    const { saver, put, last } = saverWith();
    put.mockRejectedValueOnce(new Error("broken pipe"));
    saver.change(mapNamed("a"));
    await vi.advanceTimersByTimeAsync(1_000);
    expect(last()?.kind).toBe("retrying");
    expect(saver.pending()?.map).toEqual(mapNamed("a"));
  });

  test("stops at a conflict until a person chooses; mine is saved over the other edition", async () => {
    const { saver, put, last } = saverWith({
      kind: "conflict",
      theirs: emptyMap,
      edition: 9,
      message: "changed elsewhere",
    });
    saver.change(mapNamed("a"));
    await vi.advanceTimersByTimeAsync(1_000);
    saver.change(mapNamed("b"));
    await vi.advanceTimersByTimeAsync(60_000);
    expect(put).toHaveBeenCalledTimes(1);
    expect(last()).toMatchObject({ kind: "conflict", theirs: emptyMap });
    saver.resolve("mine");
    await vi.advanceTimersByTimeAsync(0);
    expect(put).toHaveBeenLastCalledWith(mapNamed("b"), 9);
    expect(last()?.kind).toBe("saved");
  });

  test("theirs drops what waited and goes on from their edition", async () => {
    const { saver, put } = saverWith({ kind: "conflict", theirs: emptyMap, edition: 9, message: "" });
    saver.change(mapNamed("a"));
    await vi.advanceTimersByTimeAsync(1_000);
    saver.resolve("theirs");
    expect(saver.pending()).toBeNull();
    saver.change(mapNamed("c"));
    await vi.advanceTimersByTimeAsync(1_000);
    expect(put).toHaveBeenLastCalledWith(mapNamed("c"), 9);
  });

  test("flush saves at once, and tells when it could not", async () => {
    const { saver, put } = saverWith();
    saver.change(mapNamed("a"));
    expect(await saver.flush()).toBe(true);
    expect(put).toHaveBeenCalledTimes(1);
    const away = saverWith({ kind: "later", message: "away" });
    away.saver.change(mapNamed("a"));
    expect(await away.saver.flush()).toBe(false);
    expect(away.saver.pending()?.map).toEqual(mapNamed("a"));
    away.saver.stop();
  });

  test("a refusal is not tried again by itself", async () => {
    const { saver, put, last } = saverWith({ kind: "refused", message: "The unit has moved on." });
    saver.change(mapNamed("a"));
    await vi.advanceTimersByTimeAsync(600_000);
    expect(put).toHaveBeenCalledTimes(1);
    expect(last()).toEqual({ kind: "refused", message: "The unit has moved on." });
  });
});
