import fc from "fast-check";
import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import { circuitOf } from "./circuit";
import { demoMaps } from "./demo-maps";
import {
  elementKindList,
  elementKinds,
  newElement,
  terminalsOf,
  withField,
  type FieldDescriptor,
} from "./elements";
import { energyMapSchema, type Conductor, type Element, type EnergyMap } from "./energy-map";
import { allAt } from "./isolation";
import { findJoins } from "./joins";
import { liveConductors } from "./live";
import { extended, part, wire, withData } from "./map-builder";
import { viewOf } from "./map-view";
import { analyseReverse } from "./reverse";
import { ruleSets } from "./rule-set";
import { starterMaps } from "./starter-maps";
import { submissionProblems } from "./submission";

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const factsFor = (map: EnergyMap) => ({
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: map.elements.some(({ kind }) => kind === "earth-terminal")
    ? ("I" as const)
    : ("II" as const),
  cordLengthM: 2,
  cordAreaMm2: 0.75,
});

/** Any element of a kind: each datum unknown or some value that its form allows. */
function anyElement(id: string): fc.Arbitrary<Element> {
  return fc.constantFrom(...elementKindList).chain((kind) => {
    const fields: FieldDescriptor[] = elementKinds[kind].fields;
    const values = fields.map((field) =>
      field.type === "choice"
        ? fc.constantFrom(...(field.choices ?? []).map(({ value }) => value))
        : field.type === "number"
          ? fc.constantFrom("", "0", "1", "2", "3", "5", "13.2", "230", "0.001", "1000000")
          : fc.constantFrom("", "E0", "E1", "E9"),
    );
    return fc.tuple(...values).map((texts) =>
      fields.reduce(
        (element: Element, field, index) => {
          const changed = withField(element, field.name, texts[index] ?? "");
          return changed.ok ? changed.element : element;
        },
        newElement(kind, id),
      ),
    );
  });
}

const anyMap: fc.Arbitrary<EnergyMap> = fc
  .integer({ min: 1, max: 9 })
  .chain((count) => fc.tuple(...Array.from({ length: count }, (_, index) => anyElement(`E${index}`))))
  .chain((elements) => {
    const ends = elements.flatMap((element) =>
      terminalsOf(element).map(({ name }) => ({ element: element.id, terminal: name })),
    );
    const end = fc.constantFrom(...ends, { element: "GONE", terminal: "1" });
    return fc
      .array(
        fc.record({
          from: end,
          to: end,
          area: fc.constantFrom({ mm2: 0.5 }, { mm2: 1.5 }, { awg: 20 }, { awg: 40 }, { mm2: 200 }, null),
          lengthM: fc.constantFrom(null, 0.1, 2),
          insulation: fc.constantFrom("pvc" as const, "none" as const, "unknown" as const),
          circuit: fc.constantFrom("mains" as const, "elv" as const, "earth" as const),
          ambientC: fc.constantFrom(undefined, null, 45, 200),
        }),
        { maxLength: 14 },
      )
      .map((rows): EnergyMap => ({
        format: "mainsgate-energy-map",
        version: 1,
        elements,
        conductors: rows.map((row, index): Conductor => ({ id: `W${index}`, ...row })),
      }));
  });

function everyNumber(value: unknown, found: number[] = []): number[] {
  if (typeof value === "number") found.push(value);
  else if (value !== null && typeof value === "object")
    for (const each of Object.values(value)) everyNumber(each, found);
  return found;
}

test(
  "on any map that fits the schema the engine ends, gives no NaN, and says the same twice",
  { timeout: 120_000 },
  () => {
    fc.assert(
      fc.property(
        anyMap,
        fc.constantFrom("I" as const, "II" as const),
        fc.constantFrom(...ruleSets),
        (map, protectionClass, ruleSet) => {
          expect(energyMapSchema.safeParse(map).success).toBe(true);
          const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass };
          const before = JSON.stringify(map);
          const once = {
            analysis: analyse(map, ruleSet, facts),
            sheet: deriveBenchSheet(map, ruleSet, facts),
            refused: submissionProblems(map, facts),
          };
          expect(everyNumber(once).every(Number.isFinite)).toBe(true);
          expect(JSON.stringify(once)).not.toMatch(/NaN|Infinity|undefined/);
          expect(new Set(once.sheet.map(({ key }) => key)).size).toBe(once.sheet.length);
          expect(new Set(once.analysis.statements.map(({ id }) => id)).size).toBe(
            once.analysis.statements.length,
          );
          expect(
            JSON.stringify({
              analysis: analyse(map, ruleSet, facts),
              sheet: deriveBenchSheet(map, ruleSet, facts),
              refused: submissionProblems(map, facts),
            }),
          ).toBe(JSON.stringify(once));
          expect(JSON.stringify(map)).toBe(before);
        },
      ),
      { numRuns: 300 },
    );
  },
);

/** Data whose unknown must not make anything better: all of them, for every sound and faulty map of ours. */
const known: { name: string; map: EnergyMap; id: string; field: string; unknown: unknown }[] = Object.entries(
  {
    ...demoMaps,
    bench: starterMaps[0]?.map ?? demoMaps.sound,
    amplifier: starterMaps[4]?.map ?? demoMaps.sound,
  },
).flatMap(([name, map]) =>
  map.elements.flatMap((element) => {
    const data: Record<string, unknown> = { ...element };
    const fields: FieldDescriptor[] = elementKinds[element.kind].fields;
    return fields.flatMap((field) => {
      const can = field.nullable || field.choices?.some(({ value }) => value === "unknown") === true;
      const unknown = field.nullable ? null : "unknown";
      return can && data[field.name] !== unknown
        ? [{ name, map, id: element.id, field: field.name, unknown }]
        : [];
    });
  }),
);

test("forgetting a datum never turns a fail or an open question into a pass", { timeout: 120_000 }, () => {
  expect(known.length).toBeGreaterThan(500);
  for (const { name, map, id, field, unknown } of known) {
    const facts = factsFor(map);
    const before = new Map(
      deriveBenchSheet(map, rules, facts).map((check) => [check.key, check.computed?.verdict ?? null]),
    );
    for (const check of deriveBenchSheet(withData(map, id, { [field]: unknown }), rules, facts)) {
      const was = before.get(check.key);
      if (check.computed?.verdict !== "pass" || was === undefined || was === null) continue;
      expect([name, id, field, check.key, was]).toEqual([name, id, field, check.key, "pass"]);
    }
  }
});

test("forgetting a conductor's cross-section or length never helps either", { timeout: 120_000 }, () => {
  for (const [name, map] of Object.entries(demoMaps)) {
    const facts = factsFor(map);
    const before = new Map(
      deriveBenchSheet(map, rules, facts).map((check) => [check.key, check.computed?.verdict ?? null]),
    );
    for (const conductor of map.conductors) {
      for (const lost of [{ area: null }, { lengthM: null }]) {
        const after: EnergyMap = {
          ...map,
          conductors: map.conductors.map((each) => (each === conductor ? { ...each, ...lost } : each)),
        };
        for (const check of deriveBenchSheet(after, rules, facts)) {
          if (check.computed?.verdict === "pass" && before.get(check.key) !== null)
            expect([name, conductor.id, check.key, before.get(check.key)]).toEqual([
              name,
              conductor.id,
              check.key,
              "pass",
            ]);
        }
      }
    }
  }
});

test("a map of which nothing is known passes nothing that rests on data", { timeout: 120_000 }, () => {
  fc.assert(
    fc.property(anyMap, (map) => {
      const blank: EnergyMap = {
        ...map,
        elements: map.elements.map(({ kind, id }) => newElement(kind, id)),
        conductors: map.conductors.map((each) => ({ ...each, area: null, lengthM: null })),
      };
      for (const check of deriveBenchSheet(blank, rules, {
        supplyVolts: 230,
        supplyHertz: 50,
        protectionClass: "II",
      })) {
        if (check.family === "fusing" || check.key.startsWith("insulation-barrier"))
          expect([check.key, check.computed?.verdict]).not.toEqual([check.key, "pass"]);
      }
    }),
    { numRuns: 150 },
  );
});

/** Batteries, fuses, switches, diodes and loads with random wires: enough to compare with a plain closure. */
const directMap: fc.Arbitrary<EnergyMap> = fc
  .array(
    fc.constantFrom(
      "battery" as const,
      "fuse" as const,
      "switch" as const,
      "diode" as const,
      "load" as const,
    ),
    { minLength: 2, maxLength: 8 },
  )
  .chain((kinds) => {
    const elements = [
      part("battery", "E0", "cells"),
      ...kinds.map((kind, index) => newElement(kind, `E${index + 1}`)),
    ];
    const ends = elements.flatMap((element) =>
      terminalsOf(element).map(({ name }) => `${element.id}.${name}`),
    );
    const pair = fc.tuple(fc.constantFrom(...ends), fc.constantFrom(...ends));
    return fc.array(pair, { minLength: 1, maxLength: 14 }).map((pairs): EnergyMap => ({
      format: "mainsgate-energy-map",
      version: 1,
      elements,
      conductors: pairs.map(([from, to], index) => wire(`W${index}`, from, to, "elv", 1, 0.1)),
    }));
  });

/** Which terminals each battery's plus reaches: closure of a matrix, written without the engine's graph. */
function closure(map: EnergyMap, closed: (id: string) => boolean): (from: string, to: string) => boolean {
  const names = map.elements.flatMap((element) =>
    terminalsOf(element).map(({ name }) => `${element.id}.${name}`),
  );
  const at = new Map(names.map((name, index) => [name, index]));
  const reach = names.map((_, row) => names.map((__, column) => row === column));
  const join = (from: string, to: string) => {
    const [a, b] = [at.get(from), at.get(to)];
    const row = a === undefined ? undefined : reach[a];
    if (row !== undefined && b !== undefined) row[b] = true;
  };
  for (const { from, to } of map.conductors) {
    join(`${from.element}.${from.terminal}`, `${to.element}.${to.terminal}`);
    join(`${to.element}.${to.terminal}`, `${from.element}.${from.terminal}`);
  }
  for (const { id, kind } of map.elements) {
    if (kind === "diode") join(`${id}.A`, `${id}.K`);
    if (kind === "fuse")
      for (const [a, b] of [
        ["1", "2"],
        ["2", "1"],
      ] as const)
        join(`${id}.${a}`, `${id}.${b}`);
    if (kind === "switch" && closed(id))
      for (const [a, b] of [
        ["1a", "1b"],
        ["1b", "1a"],
      ] as const)
        join(`${id}.${a}`, `${id}.${b}`);
  }
  for (let middle = 0; middle < names.length; middle++) {
    for (const row of reach) {
      if (row[middle] !== true) continue;
      reach[middle]?.forEach((reached, column) => {
        if (reached) row[column] = true;
      });
    }
  }
  return (from, to) => reach[at.get(from) ?? -1]?.[at.get(to) ?? -1] === true;
}

test("what is live directly agrees with a plain closure, for all positions of the switches", () => {
  fc.assert(
    fc.property(directMap, fc.nat(255), (map, bits) => {
      const circuit = circuitOf(viewOf(map));
      const positions = new Map(
        circuit.switches.map(({ id }, index) => [
          id,
          (bits >> index) & 1 ? ("on" as const) : ("off" as const),
        ]),
      );
      const reaches = closure(map, (id) => positions.get(id) === "on");
      const live = new Map(
        liveConductors(circuit, positions).map(({ conductor, from }) => [conductor, from]),
      );
      for (const { id, from } of map.conductors) {
        const expected = circuit.sources
          .map(({ element }) => element)
          .filter((source) => reaches(`${source}.+`, `${from.element}.${from.terminal}`));
        const found = (live.get(id) ?? []).filter(({ how }) => how === "direct").map(({ source }) => source);
        expect(found.sort()).toEqual(expected.sort());
      }
    }),
    { numRuns: 400 },
  );
});

test("one source drives another exactly when a plain closure leads from plus to plus and from minus to minus", () => {
  fc.assert(
    fc.property(directMap, (map) => {
      const reaches = closure(map, () => true);
      const batteries = map.elements.filter(({ kind }) => kind === "battery").map(({ id }) => id);
      const expected = batteries.flatMap((from) =>
        batteries
          .filter((to) => to !== from && reaches(`${from}.+`, `${to}.+`) && reaches(`${to}.-`, `${from}.-`))
          .map((to) => `${from} ${to}`),
      );
      const found = analyseReverse(circuitOf(viewOf(map)))
        .paths.filter(({ failed }) => failed === null)
        .map(({ from, to }) => `${from} ${to}`);
      expect([...new Set(found)].sort()).toEqual(expected.sort());
    }),
    { numRuns: 400 },
  );
});

test("a diode put into a conductor never opens a new way backwards", () => {
  fc.assert(
    fc.property(directMap, fc.nat(13), fc.boolean(), (map, pick, turned) => {
      const cut = map.conductors[pick % map.conductors.length];
      if (cut === undefined) return;
      const end = ({ element, terminal }: Conductor["from"]) => `${element}.${terminal}`;
      const after = extended(
        { ...map, conductors: map.conductors.filter((each) => each !== cut) },
        [part("diode", "DX", "added")],
        [
          wire("Y1", end(cut.from), turned ? "DX.K" : "DX.A", "elv", 1, 0.1),
          wire("Y2", turned ? "DX.A" : "DX.K", end(cut.to), "elv", 1, 0.1),
        ],
      );
      const pairs = (each: EnergyMap) =>
        analyseReverse(circuitOf(viewOf(each)))
          .paths.filter(({ failed }) => failed === null)
          .map(({ from, to }) => `${from} ${to}`);
      const before = new Set(pairs(map));
      for (const pair of pairs(after)) expect(before.has(pair)).toBe(true);
    }),
    { numRuns: 300 },
  );
});

test("joins are found as by going through every combination of switches", () => {
  fc.assert(
    fc.property(directMap, (map) => {
      const reachesWith = (on: number) => {
        const ids = map.elements.filter(({ kind }) => kind === "switch").map(({ id }) => id);
        return closure(map, (id) => ((on >> ids.indexOf(id)) & 1) === 1);
      };
      const switches = map.elements.filter(({ kind }) => kind === "switch").length;
      const fewest = new Map<string, number>();
      for (let on = 0; on < 2 ** switches; on++) {
        const reaches = reachesWith(on);
        const count = on.toString(2).replaceAll("0", "").length;
        for (const { id, kind } of map.elements) {
          if (kind !== "battery" || !reaches(`${id}.+`, `${id}.-`)) continue;
          fewest.set(id, Math.min(fewest.get(id) ?? Infinity, count));
        }
      }
      const shorts = findJoins(circuitOf(viewOf(map))).filter(({ kind }) => kind === "short");
      expect(new Set(shorts.map(({ source }) => source))).toEqual(new Set(fewest.keys()));
      for (const { source, switchesOn } of shorts) {
        // None of the switches named can be left off.
        expect(switchesOn.length).toBeGreaterThanOrEqual(fewest.get(source) ?? Infinity);
        for (const spared of switchesOn)
          expect(
            closure(map, (id) => switchesOn.includes(id) && id !== spared)(`${source}.+`, `${source}.-`),
          ).toBe(false);
        expect(closure(map, (id) => switchesOn.includes(id))(`${source}.+`, `${source}.-`)).toBe(true);
      }
    }),
    { numRuns: 300 },
  );
});

test("switching on never takes a direct connection away", () => {
  fc.assert(
    fc.property(directMap, (map) => {
      const circuit = circuitOf(viewOf(map));
      const direct = (position: "on" | "off") =>
        new Set(
          liveConductors(circuit, allAt(circuit, position)).flatMap(({ conductor, from }) =>
            from.filter(({ how }) => how === "direct").map(({ source }) => `${conductor} ${source}`),
          ),
        );
      const on = direct("on");
      for (const each of direct("off")) expect(on.has(each)).toBe(true);
    }),
    { numRuns: 200 },
  );
});
