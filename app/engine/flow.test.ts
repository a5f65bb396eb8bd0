import fc from "fast-check";
import { expect, test } from "vitest";

import { circuitOf, type Circuit } from "./circuit";
import { conduction } from "./energise";
import { largestFlow, networkOf } from "./flow";
import { mapOf, part, wire } from "./map-builder";
import { viewOf } from "./map-view";

const ask = (circuit: Circuit, start: string, end: string) => {
  const [from, to] = [start, end].map((each) =>
    circuit.view.nodeOf(each.split(".")[0] ?? "", each.split(".")[1] ?? ""),
  );
  const network = networkOf(circuit, {
    conducts: conduction(circuit, { positions: new Map(), includePossible: true }),
    throughLoads: false,
    exceptElement: "",
    isHot: () => false,
    isReturn: () => false,
    capacities: new Map(
      circuit.view.ofKind("fuse").map(({ id, ratingAmps }) => [id, ratingAmps ?? Infinity]),
    ),
  });
  return largestFlow(circuit, network, from ?? -1, to ?? -1, -1);
};

test("fuses in series let the smaller through, in parallel their sum", () => {
  const fuse = (id: string, ratingAmps: number) => part("fuse", id, "", { ratingAmps });
  const series = circuitOf(
    viewOf(
      mapOf(
        [fuse("F1", 10), fuse("F2", 3), fuse("F3", 5)],
        [wire("W1", "F1.2", "F2.1", "elv", 1, 1), wire("W2", "F2.2", "F3.1", "elv", 1, 1)],
      ),
    ),
  );
  expect(ask(series, "F1.1", "F3.2")).toEqual({ amps: 3, devices: ["F2"] });
  const parallel = circuitOf(
    viewOf(
      mapOf(
        [fuse("F1", 2), fuse("F2", 3)],
        [wire("W1", "F1.1", "F2.1", "elv", 1, 1), wire("W2", "F1.2", "F2.2", "elv", 1, 1)],
      ),
    ),
  );
  expect(ask(parallel, "F1.1", "F2.2")).toEqual({ amps: 5, devices: ["F1", "F2"] });
});

test("without a device between, nothing limits; without a way, nothing flows", () => {
  const bare = circuitOf(
    viewOf(
      mapOf(
        [part("bleeder", "R1", ""), part("bleeder", "R2", "")],
        [wire("W1", "R1.1", "R2.1", "elv", 1, 1)],
      ),
    ),
  );
  expect(ask(bare, "R1.1", "R2.1").amps).toBe(Infinity);
  expect(ask(bare, "R1.1", "R2.2").amps).toBe(0);
});

test("the largest flow is the smallest cut, over every way to part the nodes", () => {
  const rows = fc.array(fc.record({ a: fc.nat(5), b: fc.nat(5), amps: fc.integer({ min: 1, max: 9 }) }), {
    minLength: 1,
    maxLength: 9,
  });
  fc.assert(
    fc.property(rows, (all) => {
      // Posts P0 to P5, each pair of posts joined by a fuse.
      const posts = Array.from({ length: 6 }, (_, index) => part("earth-terminal", `P${index}`, ""));
      const fuses = all.map(({ amps }, index) => part("fuse", `F${index}`, "", { ratingAmps: amps }));
      const wires = all.flatMap(({ a, b }, index) => [
        wire(`A${index}`, `P${a}.PE`, `F${index}.1`, "elv", 1, 1),
        wire(`B${index}`, `F${index}.2`, `P${b}.PE`, "elv", 1, 1),
      ]);
      const found = ask(circuitOf(viewOf(mapOf([...posts, ...fuses], wires))), "P0.PE", "P5.PE");
      let least = Infinity;
      for (let side = 0; side < 64; side++) {
        const near = (post: number) => ((side >> post) & 1) === 1;
        if (!near(0) || near(5)) continue;
        least = Math.min(
          least,
          all.filter(({ a, b }) => near(a) !== near(b)).reduce((sum, { amps }) => sum + amps, 0),
        );
      }
      expect(found.amps).toBeCloseTo(least, 9);
      const cut = found.devices.reduce((sum, id) => sum + (all[Number(id.slice(1))]?.amps ?? 0), 0);
      expect(cut).toBeCloseTo(least, 9);
    }),
    { numRuns: 400 },
  );
});
