import { expect, test } from "vitest";

import {
  adiabaticArea,
  adiabaticK,
  adiabaticSeconds,
  ambientFactor,
  ampacityOf,
  applianceCordAmps,
  awgMillimetres,
  awgSquareMillimetres,
  chassisAmps,
  conductorOhms,
  freeAirAmps,
  solidOhmsPerKm,
  voltageDrop,
} from "./conductor-data";
import type { Conductor } from "./energy-map";

const conductor = (mm2: number, circuit: Conductor["circuit"], ambientC?: number): Conductor => ({
  id: "W1",
  from: { element: "A", terminal: "1" },
  to: { element: "B", terminal: "1" },
  area: { mm2 },
  lengthM: 1,
  insulation: "pvc",
  circuit,
  ambientC,
});

test.each([
  // IEC 60228, class 5, plain copper, Ω/km at 20 °C (a public table).
  [0.5, 39.0],
  [0.75, 26.0],
  [1.0, 19.5],
  [1.5, 13.3],
  [2.5, 7.98],
  [4, 4.95],
  [6, 3.3],
  [10, 1.91],
  [16, 1.21],
])("a kilometre of %d mm² class 5 has %d Ω", (mm2, ohms) => {
  expect(conductorOhms(mm2, 1000)).toBeCloseTo(ohms, 9);
});

test("2 m of 0.75 mm² have 52.0 mΩ at 20 °C and 62.2 mΩ at 70 °C", () => {
  expect(conductorOhms(0.75, 2) * 1000).toBeCloseTo(52.0, 6);
  expect(conductorOhms(0.75, 2, 70) * 1000).toBeCloseTo(62.2, 1);
});

test("12 V, 5 A over 1.5 m of 0.75 mm² loses 0.390 V, 3.25 %", () => {
  expect(voltageDrop(0.75, 1.5, 5)).toBeCloseTo(0.39, 9);
});

test("the loss at 60 °C agrees with BS 7671 Table 4F3B (62 mV/A/m) to 4 %", () => {
  const table = (62 * 5 * 1.5) / 1000;
  const computed = voltageDrop(0.75, 1.5, 5, 60);
  expect(computed).toBeCloseTo(0.451, 3);
  expect(Math.abs(computed - table) / table).toBeLessThan(0.04);
});

test.each([
  // Gauge, mm², Ω/km (a public wire table; the formula gives the same).
  [10, 5.261, 3.277],
  [12, 3.309, 5.211],
  [14, 2.081, 8.285],
  [16, 1.309, 13.17],
  [18, 0.823, 20.95],
  [20, 0.518, 33.31],
  [22, 0.326, 52.96],
  [24, 0.205, 84.2],
  [26, 0.129, 133.9],
])("AWG %d is %d mm² and %d Ω/km", (gauge, mm2, ohms) => {
  expect(awgSquareMillimetres(gauge)).toBeCloseTo(mm2, 3);
  expect(solidOhmsPerKm(awgSquareMillimetres(gauge)) / ohms).toBeCloseTo(1, 2);
});

test("AWG 18 is 1.0237 mm thick", () => {
  expect(awgMillimetres(18)).toBeCloseTo(1.0237, 4);
});

test.each([
  // BS 7671 Table 4F3A, single phase.
  [0.5, 3],
  [0.75, 6],
  [1.0, 10],
  [1.25, 13],
  [1.5, 16],
  [2.5, 25],
  [4, 32],
])("a mains conductor of %d mm² may carry %d A", (mm2, amps) => {
  expect(ampacityOf(conductor(mm2, "mains"))?.amps).toBe(amps);
});

test("an area between rows counts as the smaller row, one below the table is not known", () => {
  expect(ampacityOf(conductor(0.9, "mains"))?.amps).toBe(6);
  expect(ampacityOf(conductor(0.4, "mains"))).toBeNull();
  expect(ampacityOf({ ...conductor(1, "mains"), area: null })).toBeNull();
});

test("warm air takes its factor (with Table 4F3A); above the table nothing is known", () => {
  expect(ampacityOf(conductor(1, "mains", 40))?.amps).toBe(8.2);
  expect(ambientFactor(30)).toBe(1);
  expect(ambientFactor(36)).toBe(0.82);
  expect(ambientFactor(60)).toBeNull();
});

test("8 A on 3 m of 0.75 mm² is too much by IEC 60335-1 Table 11; 1.0 mm² will do", () => {
  const amps = new Map(applianceCordAmps);
  expect(amps.get(0.75)).toBe(6);
  expect(amps.get(1.0)).toBe(10);
});

test("at each gauge the free-air figure is the table's, between them it lies between, and half of it counts", () => {
  for (const [gauge, amps] of chassisAmps)
    expect(freeAirAmps(awgSquareMillimetres(gauge))).toBeCloseTo(amps, 6);
  const between = freeAirAmps(0.4) ?? 0;
  expect(between).toBeGreaterThan(7);
  expect(between).toBeLessThan(11);
  expect(ampacityOf({ ...conductor(1, "elv"), area: { awg: 24 } })?.amps).toBe(1.75);
  expect(freeAirAmps(0.05)).toBeNull();
});

test.each([
  // Start, final temperature, k for copper (IEC 60364-5-54 and 60724 tables, rounded).
  [70, 160, 114.8],
  [90, 160, 99.7],
  [90, 250, 142.9],
  [60, 200, 140.7],
  [85, 220, 134.0],
  [180, 350, 132.3],
  [30, 160, 142.7],
])("k from %d to %d °C is %d", (start, final, k) => {
  expect(adiabaticK(start, final)).toBeCloseTo(k, 1);
});

test("adiabatic examples worked by hand", () => {
  expect(adiabaticSeconds(115, 0.75, 287.5)).toBeCloseTo(0.09, 6);
  expect(adiabaticArea(115, 293.3, 0.1)).toBeCloseTo(0.8066, 3);
  expect((115 * 0.22) ** 2).toBeCloseTo(640.1, 1);
});
