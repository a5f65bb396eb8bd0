import { describe, expect, test } from "vitest";
import { assessLicences, type LicenceRow } from "./assess-licences";

const licence: LicenceRow = {
  id: 1,
  number: "A-17",
  authority: "Test Board",
  validFrom: "2025-01-01",
  validTo: "2026-11-30",
  maxSupplyVolts: 250,
  coversBatteries: false,
  revokedAt: null,
};
const lamp = { facts: { supplyVolts: 230 }, hasBattery: false };

describe("a licence", () => {
  test("carries a signature from its first to its last day", () => {
    for (const day of ["2025-01-01", "2026-11-30"]) {
      expect(assessLicences([licence], lamp, day)).toEqual({ licence, inDate: [], inScope: [] });
    }
  });

  test("that lapsed yesterday carries none, and its last day is told", () => {
    const { licence: chosen, inDate, inScope } = assessLicences([licence], lamp, "2026-12-01");
    expect(chosen).toBeNull();
    expect(inDate).toEqual(["Licence A-17 (Test Board) lapsed: its last day was 2026-11-30."]);
    expect(inScope).not.toEqual([]);
  });

  test("that begins tomorrow carries none yet", () => {
    expect(assessLicences([licence], lamp, "2024-12-31").inDate[0]).toContain("begins only on 2025-01-01");
  });

  test("that was revoked carries none, whatever its dates", () => {
    const revoked = { ...licence, revokedAt: new Date("2026-05-01T00:00:00Z") };
    expect(assessLicences([revoked], lamp, "2026-06-01").inDate[0]).toContain("revoked");
  });

  test("must cover the supply voltage; the limit itself is covered", () => {
    expect(assessLicences([licence], { ...lamp, facts: { supplyVolts: 250 } }, "2026-06-01").licence).toEqual(
      licence,
    );
    const high = assessLicences([licence], { ...lamp, facts: { supplyVolts: 400 } }, "2026-06-01");
    expect(high.licence).toBeNull();
    expect(high.inScope).toEqual([
      "Licence A-17 (Test Board) covers supplies up to 250 V; this unit is for 400 V.",
    ]);
  });

  test("must cover batteries where there is one", () => {
    expect(assessLicences([licence], { ...lamp, hasBattery: true }, "2026-06-01").inScope[0]).toContain(
      "battery",
    );
  });
});

test("one of several that fits is enough, and no licence at all is told as such", () => {
  const wide = { ...licence, id: 2, number: "B-1", coversBatteries: true, maxSupplyVolts: 400 };
  const unit = { facts: { supplyVolts: 400 }, hasBattery: true };
  expect(assessLicences([licence, wide], unit, "2026-06-01").licence).toEqual(wide);
  expect(assessLicences([], unit, "2026-06-01")).toMatchObject({
    licence: null,
    inDate: [expect.stringContaining("no licence")],
  });
});
