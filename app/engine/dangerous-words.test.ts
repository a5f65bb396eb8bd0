import { expect, test } from "vitest";

import type { BenchCheck } from "./bench-check";
import { deriveBenchSheet } from "./bench-sheet";
import { demoMaps } from "./demo-maps";
import type { EnergyMap } from "./energy-map";
import { without } from "./map-builder";
import { ruleSets } from "./rule-set";
import { starterMaps } from "./starter-maps";

// What a step tells a person to do must not hurt that person.

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = {
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 2,
  cordAreaMm2: 0.75,
} as const;
const sheet = (map: EnergyMap) =>
  new Map(deriveBenchSheet(map, rules, facts).map((each) => [each.key, each]));
const found = (map: EnergyMap, key: string): BenchCheck => {
  const check = sheet(map).get(key);
  if (check === undefined) throw new Error(`there is no check ${key}`);
  return check;
};
const words = (check: BenchCheck) => [...check.method, ...check.cautions].join("\n");
const starter = (key: string) => {
  const map = starterMaps.find((each) => each.key === key)?.map;
  if (map === undefined) throw new Error(`there is no starter ${key}`);
  return map;
};

test("no earthed probe clip on a plug pin: the scope's probe is differential or isolated, in a shrouded socket", () => {
  const check = found(starter("audio-amplifier"), "residual-voltage:X1");
  expect(check.asks.kind === "reading" && check.asks.instrument.range).toMatch(
    /differential probe or isolated/,
  );
  expect(words(check)).toMatch(/clip is earth/);
  expect(words(check)).toMatch(/shrouded test socket/);
});

test("a bridged relay makes pins live: shrouded socket, a person who may, 3.5 mA through the body network", () => {
  const check = found(demoMaps.inverterStation, "backfeed:BT1:X1");
  expect(words(check)).toMatch(/shrouded test socket/);
  expect(words(check)).toMatch(/pins can carry mains voltage/);
  expect(words(check)).toMatch(/3\.5 mA .* body network/);
  // IEC 62040-1 with the network of IEC 60990 (from memory).
  expect(check.citations.map(({ mark }) => mark)).toContain("M");
  // The plug is pulled in this step, and the unit is live all the same.
  expect(check.cautions.join("\n")).toMatch(/still live from its battery/);
  expect(check.cautions.join("\n")).not.toMatch(/done with mains on/);
});

test("the earth is brought out and never interrupted for the leakage test", () => {
  const check = found(starter("linear-bench-supply"), "earth-current:X1");
  expect(words(check)).toMatch(/brings out the earth conductor whole/);
  expect(words(check)).toMatch(/Never interrupt the earth/);
  expect(words(check)).not.toMatch(/opens out/);
});

test("no ohmmeter across a battery, and a primary that conducts is no fault", () => {
  const check = found(demoMaps.sound, "circuits-apart");
  expect(words(check)).not.toMatch(/between the poles of each source\./);
  expect(words(check)).toMatch(/Never put the ohmmeter across a battery/);
  expect(words(check)).toMatch(/Between line and neutral a winding or a heater conducts/);
  expect(check.method[0]).toMatch(/take both leads off BT1/);
});

test("before test voltage is put on, batteries are off and the inverter stands", () => {
  for (const [key, check] of sheet(demoMaps.inverterStation)) {
    const tested = check.family === "insulation" || check.key.startsWith("open-pole");
    if (!tested || check.asks.kind !== "reading" || check.asks.unit !== "MΩ") continue;
    expect([key, check.method[0]]).toEqual([
      key,
      "Stop U1 (Inverter); pull the plug of X1 (Appliance inlet); take both leads off BT1 (Battery) and cover them; measure that nothing is live any more.",
    ]);
  }
});

test.each(Object.entries(demoMaps))(
  "%s: wherever a hand goes in, a battery is named beside the plug",
  (_name, map) => {
    const battery = map.elements.some(({ kind }) => kind === "battery");
    const inlet = map.elements.some(({ kind }) => kind === "mains-inlet");
    for (const check of sheet(map).values()) {
      const told = check.cautions.join("\n");
      if (battery && /Pull the plug and keep it in sight/.test(told) && !check.key.startsWith("visual-cord"))
        expect([check.key, told]).toEqual([check.key, expect.stringMatching(/does not make this unit dead/)]);
      if (!inlet)
        expect([check.key, told]).toEqual([check.key, expect.not.stringMatching(/done with mains on/)]);
    }
  },
);

test("an inverter without a mains plug is as dangerous, and no step speaks of a plug or of mains being on", () => {
  const battery = without(demoMaps.inverterStation, "X1", "F1", "S1");
  for (const check of sheet(battery).values()) {
    const told = check.cautions.join("\n");
    expect([check.key, told]).toEqual([
      check.key,
      expect.not.stringMatching(/done with mains on|Pull the plug/),
    ]);
    if (check.family === "function") expect(told).toMatch(/inverter makes mains voltage from the battery/);
  }
});
