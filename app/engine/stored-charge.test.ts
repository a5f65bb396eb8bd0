import { expect, test } from "vitest";

import { analyse } from "./analyse";
import { deriveBenchSheet } from "./bench-sheet";
import { circuitOf } from "./circuit";
import { mapOf, part, wire } from "./map-builder";
import { viewOf } from "./map-view";
import { ruleSets } from "./rule-set";
import { pinCharges } from "./stored-charge";

const rules = ruleSets[0];
if (rules === undefined) throw new Error("there is no rule set");
const facts = { supplyVolts: 230, supplyHertz: 50, protectionClass: "II" } as const;

/** A capacitor behind the first of some switches, a bleeder behind the last, all on the same pins. */
function apart(switches: number) {
  const ids = Array.from({ length: switches }, (_, index) => `S${index + 1}`);
  const last = ids.at(-1) ?? "";
  return mapOf(
    [
      part("mains-inlet", "X1", "Inlet", { earthPin: "no", polarised: "no" }),
      ...ids.map((id) => part("switch", id, "", { poles: 2, promise: "isolation" })),
      part("x-capacitor", "CX1", "", { nanofarads: 1000, safetyClass: "X2" }),
      part("bleeder", "R1", "", { kilohms: 220 }),
    ],
    [
      ...ids.flatMap((id) => [
        wire(`L${id}`, "X1.L", `${id}.1a`, "mains", 0.75, 0.2),
        wire(`N${id}`, "X1.N", `${id}.2a`, "mains", 0.75, 0.2),
      ]),
      wire("W1", "S1.1b", "CX1.1", "mains", 0.75, 0.2),
      wire("W2", "S1.2b", "CX1.2", "mains", 0.75, 0.2),
      wire("W3", `${last}.1b`, "R1.1", "mains", 0.75, 0.2),
      wire("W4", `${last}.2b`, "R1.2", "mains", 0.75, 0.2),
    ],
  );
}

test("a capacitor behind one switch and its bleeder behind another: on with the other off leaves the peak", () => {
  const map = apart(2);
  const inlet = map.elements.find((each) => each.kind === "mains-inlet");
  if (inlet?.kind !== "mains-inlet") throw new Error("there is no inlet");
  const charges = pinCharges(circuitOf(viewOf(map)), inlet, 230, 1);
  expect(charges.find(({ setting }) => setting === "on")?.volts).toBeCloseTo(325.27 * Math.exp(-1 / 0.22), 1);
  expect(charges.find(({ setting }) => setting === "S1 on and S2 off")?.volts).toBeCloseTo(325.27, 1);
  const check = deriveBenchSheet(map, rules, facts).find(({ key }) => key === "residual-voltage:X1");
  expect(check?.computed?.verdict).toBe("fail");
  expect(check?.computed?.reasons.map(({ text }) => text).join("\n")).toContain("with S1 on and S2 off");
  expect(
    analyse(map, rules, facts).statements.find(({ id }) => id === "stored-charge pins X1 S1 on and S2 off")
      ?.level,
  ).toBe("danger");
});

test("behind one and the same switch every combination is good", () => {
  const check = deriveBenchSheet(apart(1), rules, facts).find(({ key }) => key === "residual-voltage:X1");
  expect(check?.computed?.verdict).toBe("pass");
});

test("with more switches at the pins than are tried the answer is never a pass", () => {
  const map = apart(9);
  const check = deriveBenchSheet(map, rules, facts).find(({ key }) => key === "residual-voltage:X1");
  expect(check?.computed?.verdict).not.toBe("pass");
  expect(check?.computed?.reasons.map(({ text }) => text).join("\n")).toContain("more switches");
});
