import { expect, test } from "vitest";

import { demoMaps } from "./demo-maps";
import { energyMapSchema } from "./energy-map";
import { starterMaps } from "./starter-maps";
import { submissionProblems } from "./submission";

const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 2,
  cordAreaMm2: 0.75,
} as const;

test.each(starterMaps)("$key is a whole map that could be submitted", ({ map }) => {
  expect(energyMapSchema.parse(map)).toEqual(map);
  const protectionClass = map.elements.some(({ kind }) => kind === "earth-terminal") ? "I" : "II";
  expect(submissionProblems(map, { ...facts, protectionClass })).toEqual([]);
});

test.each(Object.entries(demoMaps))(
  "the demo map %s fits the schema and leads nowhere unknown",
  (_name, map) => {
    expect(energyMapSchema.parse(map)).toEqual(map);
    expect(
      submissionProblems(map, { ...facts, protectionClass: "II" }).filter(
        ({ subject }) => subject?.kind === "conductor",
      ),
    ).toEqual([]);
  },
);
