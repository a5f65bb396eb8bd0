import { expect, test } from "vitest";
import { fitLicence, type LicenceTerms } from "./licence-fit";

const licence: LicenceTerms = {
  number: "E-1",
  authority: "Test Authority",
  validFrom: "2026-01-01",
  validTo: "2026-12-31",
  maxSupplyVolts: 230,
  coversBatteries: false,
  revoked: false,
};
const lamp = { supplyVolts: 230, hasBattery: false };

test.each(["2026-01-01", "2026-06-15", "2026-12-31"])("counts on %s", (day) => {
  expect(fitLicence([licence], lamp, day)).toEqual({ kind: "fits", licence });
});

test("does not count the day before it begins or the day after it ends, and says so", () => {
  expect(fitLicence([licence], lamp, "2025-12-31")).toEqual({
    kind: "not-in-date",
    reasons: ["Licence E-1 (Test Authority) begins only on 1 Jan 2026."],
  });
  expect(fitLicence([licence], lamp, "2027-01-01")).toEqual({
    kind: "not-in-date",
    reasons: ["Licence E-1 (Test Authority) lapsed: its last day was 31 Dec 2026."],
  });
});

test("no licence, or a revoked one, is no licence", () => {
  expect(fitLicence([], lamp, "2026-06-15")).toMatchObject({
    kind: "not-in-date",
    reasons: [expect.stringContaining("no licence on file")],
  });
  expect(fitLicence([{ ...licence, revoked: true }], lamp, "2026-06-15")).toMatchObject({
    kind: "not-in-date",
    reasons: [expect.stringContaining("revoked")],
  });
});

test("the scope is the supply voltage and batteries, each named when it is too small", () => {
  expect(fitLicence([licence], { supplyVolts: 400, hasBattery: true }, "2026-06-15")).toEqual({
    kind: "not-in-scope",
    reasons: [
      "Licence E-1 (Test Authority) covers supplies up to 230 V; this unit is for 400 V.",
      "Licence E-1 (Test Authority) does not cover battery equipment; this unit has a battery.",
    ],
  });
  expect(fitLicence([licence], { supplyVolts: 230.1, hasBattery: false }, "2026-06-15").kind).toBe(
    "not-in-scope",
  );
});

test("of several licences the one that covers the unit is taken", () => {
  const wide = { ...licence, number: "E-2", coversBatteries: true };
  const lapsed = { ...wide, number: "E-3", validTo: "2026-02-01" };
  expect(fitLicence([licence, lapsed, wide], { supplyVolts: 230, hasBattery: true }, "2026-06-15")).toEqual({
    kind: "fits",
    licence: wide,
  });
});

test("two licences, each too small in another way, make none that fits", () => {
  const low = { ...licence, number: "E-4", maxSupplyVolts: 60, coversBatteries: true };
  expect(fitLicence([licence, low], { supplyVolts: 230, hasBattery: true }, "2026-06-15").kind).toBe(
    "not-in-scope",
  );
});
