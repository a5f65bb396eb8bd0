import { expect, test } from "vitest";

import {
  elementKindList,
  elementKinds,
  newElement,
  terminalsOf,
  withField,
  type FieldDescriptor,
} from "./elements";
import { elementSchema, energyMapSchema, emptyMap } from "./energy-map";
import { energyMapJsonSchema } from "./json-schema";
import { part, wire } from "./map-builder";
import { submissionProblems } from "./submission";

const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 2,
  cordAreaMm2: 0.75,
} as const;

test.each(elementKindList)(
  "%s: the form has exactly the fields of the schema, and new ones fit it",
  (kind) => {
    const element = newElement(kind, "E1");
    expect(elementSchema.parse(element)).toEqual(element);
    const data = Object.keys(element).filter((key) => !["id", "label", "kind"].includes(key));
    const fields: FieldDescriptor[] = elementKinds[kind].fields;
    expect(fields.map(({ name }) => name).sort()).toEqual(data.sort());
    expect(elementKinds[kind].kind).toBe(kind);
    for (const field of fields) {
      for (const { value } of field.choices ?? [])
        expect([field.name, value, withField(element, field.name, value).ok]).toEqual([
          field.name,
          value,
          true,
        ]);
      expect([field.name, withField(element, field.name, "").ok]).toEqual([field.name, field.nullable]);
    }
  },
);

test.each(elementKindList)("%s: terminals have names of their own", (kind) => {
  const names = terminalsOf(newElement(kind, "E1")).map(({ name }) => name);
  expect(names.length).toBeGreaterThan(0);
  expect(new Set(names).size).toBe(names.length);
});

test("poles and changeover set the terminals of a switch", () => {
  const names = (data: object) => terminalsOf(part("switch", "S1", "", data)).map(({ name }) => name);
  expect(names({ poles: 2 })).toEqual(["1a", "1b", "2a", "2b"]);
  expect(names({ poles: 1, throw: "changeover" })).toEqual(["1c", "1a", "1b"]);
});

test("a field takes a number with comma or point, empties to unknown, and refuses the rest without touching the element", () => {
  const fuse = newElement("fuse", "F1");
  const before = structuredClone(fuse);
  expect(withField(fuse, "ratingAmps", "3,15")).toMatchObject({ ok: true, element: { ratingAmps: 3.15 } });
  expect(withField(fuse, "ratingAmps", " ")).toMatchObject({ ok: true, element: { ratingAmps: null } });
  for (const wrong of ["-1", "0", "abc", "1e99", "Infinity"])
    expect(withField(fuse, "ratingAmps", wrong).ok).toBe(false);
  expect(withField(fuse, "acVolts", "0")).toMatchObject({ ok: true, element: { acVolts: 0 } });
  expect(withField(fuse, "standard", "made-up").ok).toBe(false);
  expect(withField(fuse, "__proto__", "x").ok).toBe(false);
  expect(withField(fuse, "kind", "switch").ok).toBe(false);
  expect(fuse).toEqual(before);
});

test("the schema refuses what is not its own", () => {
  const ok = { ...emptyMap, elements: [newElement("fuse", "F1")] };
  expect(energyMapSchema.safeParse(ok).success).toBe(true);
  for (const wrong of [
    { ...ok, version: 2 },
    { ...ok, format: "other" },
    { ...ok, extra: 1 },
    { ...ok, elements: [{ ...newElement("fuse", "F1"), colour: "red" }] },
    { ...ok, elements: [newElement("fuse", "1F")] },
    { ...ok, elements: [newElement("fuse", "F<script>")] },
    { ...ok, elements: [{ id: "F1", label: "", kind: "fuse" }] },
    { ...ok, elements: Array.from({ length: 201 }, (_, index) => newElement("fuse", `F${index}`)) },
    { ...ok, conductors: [{ ...wire("W1", "F1.1", "F1.2", "elv", 1, 1), area: { mm2: Number.NaN } }] },
    { ...ok, conductors: [{ ...wire("W1", "F1.1", "F1.2", "elv", 1, 1), area: { mm2: 1, awg: 18 } }] },
    null,
    [],
  ]) {
    expect(energyMapSchema.safeParse(wrong).success).toBe(false);
  }
});

test("the published JSON Schema names each kind and lets unknown be null", () => {
  const text = JSON.stringify(energyMapJsonSchema());
  for (const kind of elementKindList) expect(text).toContain(`"const":"${kind}"`);
  expect(energyMapJsonSchema()).toMatchObject({
    $schema: "https://json-schema.org/draft/2020-12/schema",
    additionalProperties: false,
  });
});

test("what keeps a map from being submitted is told with where and which field", () => {
  expect(submissionProblems(emptyMap, facts)).toHaveLength(1);
  const map = {
    ...emptyMap,
    elements: [
      part("mains-inlet", "X1", "Inlet"),
      part("load", "LD1", "", { supply: "mains" }),
      part("load", "LD1", "Twice"),
    ],
    conductors: [
      wire("W1", "X1.L", "LD1.L", "mains", null, 1),
      wire("W2", "X1.Q", "LD1.N", "mains", 1, 1, "unknown"),
      wire("W3", "X1.N", "GONE.1", "mains", 1, 1),
      wire("W4", "X1.N", "X1.N", "mains", 1, 1),
    ],
  };
  const told = submissionProblems(map, facts).map(
    ({ subject, field }) => `${subject?.id ?? "map"} ${field ?? "-"}`,
  );
  for (const expected of [
    "map -",
    "LD1 id",
    "LD1 label",
    "LD1 amps",
    "X1 earthPin",
    "X1 polarised",
    "W1 area",
    "W2 from",
    "W2 insulation",
    "W3 to",
    "W4 to",
  ]) {
    expect(told).toContain(expected);
  }
});
