import { expect, test } from "vitest";
import type { EnergyMap } from "./energy-map";
import { mapProblems } from "./problems";
import { starterMaps } from "./starter-maps";
import type { UnitFacts } from "./unit-facts";

const facts: UnitFacts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "I", cordLengthM: 1.5 };
const map = starterMaps[0]?.map;

/** The first starter map with the id of its second element changed to that of its first, as `spell` writes it. */
function idProblems(spell: (id: string) => string) {
  const [first, second, ...rest] = map?.elements ?? [];
  if (!map || !first || !second) throw new Error("The starter map is gone.");
  const twins: EnergyMap = { ...map, elements: [first, { ...second, id: spell(first.id) }, ...rest] };
  return mapProblems(twins, facts).filter(({ field }) => field === "id");
}

test("two ids that are the same, or differ only in capital letters, block the submission", () => {
  expect(idProblems((id) => id)).toMatchObject([
    { blocking: true, text: expect.stringContaining("used more than once") },
  ]);
  expect(idProblems((id) => id.toLowerCase())).toMatchObject([
    {
      blocking: true,
      text: expect.stringMatching(/^The ids (\w+) and (\w+) differ only in capital letters/),
    },
  ]);
  expect(idProblems((id) => `${id}9`)).toEqual([]);
});
