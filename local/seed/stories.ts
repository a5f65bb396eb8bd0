import { demoMaps } from "~/engine/demo-maps";
import type { EnergyMap } from "~/engine/energy-map";
import { starterMaps } from "~/engine/starter-maps";
import { takeUnit } from "~/services/bench/bench-turns.server";
import { finishSheet, sendBackFromBench } from "~/services/bench/finish-sheet.server";
import { raiseFinding } from "~/services/bench/raise-finding.server";
import { refuseUnit, signUnit } from "~/services/signing/decide-on-unit.server";
import { withdrawUnit } from "~/services/archive/withdraw-unit.server";
import { createUnit } from "~/services/units/create-unit.server";
import { submitUnit } from "~/services/units/submit-unit.server";
import type { UnitDetails } from "~/services/units/unit-details";
import { addPicture, drawMap, unitNow, workSheet } from "./acts";
import { day, type DemoWorkshop, type Step } from "./workshop";

/** What happens to the demo units, each told as the acts of the people concerned. All of it is invented. */
export function tellStories(workshop: DemoWorkshop): Step[] {
  const address = "127.0.0.1";
  const story = (
    builder: string,
    details: Partial<UnitDetails> & { name: string; purpose: string },
    map: EnergyMap,
  ) => {
    let number = 0;
    const steps: Step[] = [];
    const add = (daysAgo: number, hour: number, act: (at: Date) => Promise<void>) => {
      steps.push({ daysAgo, hour, act });
      return told;
    };
    const told = {
      steps,
      draft: (daysAgo: number) =>
        add(daysAgo, 8, async (at) => {
          const asBuilder = workshop.as(builder, "builder", at);
          number = await createUnit(asBuilder, { ...usual, ...details });
          await drawMap(asBuilder, number, map);
          await addPicture(asBuilder, number, `${details.name}, inside view`, { subject: "unit" });
        }),
      submit: (daysAgo: number) =>
        add(daysAgo, 9, (at) => submitUnit(workshop.as(builder, "builder", at), { unitNumber: number })),
      take: (inspector: string, daysAgo: number) =>
        add(daysAgo, 10, (at) => takeUnit(workshop.as(inspector, "inspector", at), { unitNumber: number })),
      work: (inspector: string, daysAgo: number, share = 1) =>
        add(daysAgo, 11, (at) => workSheet(workshop.as(inspector, "inspector", at), number, share)),
      find: (
        inspector: string,
        daysAgo: number,
        finding: { severity: "danger" | "defect" | "advice"; text: string; elementId: string },
      ) =>
        add(daysAgo, 12, async (at) => {
          const asInspector = workshop.as(inspector, "inspector", at);
          const { id } = await raiseFinding(asInspector, { unitNumber: number, checkKey: null, ...finding });
          await addPicture(asInspector, number, finding.elementId, { subject: "finding", findingId: id });
        }),
      sendBack: (inspector: string, daysAgo: number, reason: string) =>
        add(daysAgo, 13, (at) =>
          sendBackFromBench(workshop.as(inspector, "inspector", at), { unitNumber: number, reason }),
        ),
      finish: (inspector: string, daysAgo: number) =>
        add(daysAgo, 13, (at) =>
          finishSheet(workshop.as(inspector, "inspector", at), { unitNumber: number }),
        ),
      sign: (electrician: string, daysAgo: number, recheckInDays: number) =>
        add(daysAgo, 14, async (at) => {
          const asElectrician = workshop.as(electrician, "electrician", at);
          await signUnit(asElectrician, {
            unitNumber: number,
            expectedVersion: (await unitNow(asElectrician, number)).version,
            statement: "I reviewed the sheet, the readings and the photos, and saw the unit itself. (Demo)",
            departures: null,
            conditions: {
              place: "Indoors, dry, in the workshop",
              supply: "Socket with residual-current protection, 30 mA",
              load: "Not above the rating on its label",
              supervision: "Somebody who was shown how it works is in the room",
              other: "",
            },
            recheckOn: day(at, recheckInDays),
            signature: { method: "typed", typedName: asElectrician.person.name },
            password: workshop.passwordOf(electrician),
            address,
          });
        }),
      refuse: (electrician: string, daysAgo: number, statement: string) =>
        add(daysAgo, 14, async (at) => {
          const asElectrician = workshop.as(electrician, "electrician", at);
          await refuseUnit(asElectrician, {
            unitNumber: number,
            expectedVersion: (await unitNow(asElectrician, number)).version,
            statement,
            signature: { method: "typed", typedName: asElectrician.person.name },
            password: workshop.passwordOf(electrician),
            address,
          });
        }),
      withdraw: (electrician: string, daysAgo: number, reason: string) =>
        add(daysAgo, 15, async (at) => {
          const asElectrician = workshop.as(electrician, "electrician", at);
          await withdrawUnit(asElectrician, {
            unitNumber: number,
            expectedVersion: (await unitNow(asElectrician, number)).version,
            reason,
            password: workshop.passwordOf(electrician),
            address,
          });
        }),
    };
    return told;
  };

  return [
    story(
      "Bruna",
      {
        name: "Reading lamp for the library corner",
        purpose: "LED lamp over the book shelves, made from an aluminium profile",
        protectionClass: "II",
        cordAreaMm2: 0.75,
      },
      demoMaps.soundLamp,
    )
      .draft(160)
      .submit(158)
      .take("Ilse", 156)
      .work("Ilse", 156)
      .finish("Ilse", 156)
      .sign("Elif", 155, 365),
    story(
      "Benno",
      { name: "Bench supply 0–30 V", purpose: "Adjustable supply for the electronics table" },
      starter("linear-bench-supply"),
    )
      .draft(410)
      .submit(409)
      .take("Idris", 408)
      .work("Idris", 408)
      .finish("Idris", 408)
      .sign("Elif", 407, 365),
    story(
      "Bruna",
      {
        name: "Back-up box for the router",
        purpose: "Keeps the network up for an hour when the mains is lost",
      },
      demoMaps.backupSinglePole,
    )
      .draft(9)
      .submit(8)
      .take("Ilse", 3)
      .work("Ilse", 3, 0.3)
      .find("Ilse", 3, {
        severity: "danger",
        elementId: "S1",
        text: "One pole of the rocker breaks the line, the other the battery's plus. With it off, the neutral stays connected, and mains and battery share one switch body.",
      }),
    story(
      "Benno",
      { name: "Back-up box for the weather station", purpose: "Bridges short losses of the mains" },
      demoMaps.indicatorBackfed,
    )
      .draft(30)
      .submit(29)
      .take("Idris", 20)
      .work("Idris", 20, 0.5)
      .find("Idris", 20, {
        severity: "defect",
        elementId: "H1",
        text: "The lamp that is to show “mains present” is lit by the battery with the plug pulled. It tells something that isn't so.",
      })
      .sendBack(
        "Idris",
        20,
        "Move the lamp to the mains side of the blocking diode, and change the map with it.",
      ),
    story(
      "Betje",
      {
        name: "Light strip for the stage",
        purpose: "LED strip for the theatre group's stage edge",
        protectionClass: "II",
      },
      demoMaps.oversizedFuse,
    )
      .draft(15)
      .submit(14)
      .take("Ilse", 6)
      .work("Ilse", 6)
      .find("Ilse", 6, {
        severity: "defect",
        elementId: "F1",
        text: "The fuse is 10 A, the wire behind it is good for 3 A.",
      })
      .finish("Ilse", 6),
    story(
      "Bruna",
      {
        name: "Back-up box for the till",
        purpose: "Keeps the till and its printer going through a loss of mains",
      },
      demoMaps.sound,
    )
      .draft(12)
      .submit(11)
      .take("Idris", 4)
      .work("Idris", 4)
      .finish("Idris", 4),
    story(
      "Benno",
      {
        name: "Lamp with a switch in the cord",
        purpose: "Table lamp for the tea kitchen",
        protectionClass: "II",
      },
      demoMaps.neutralSwitched,
    )
      .draft(70)
      .submit(69)
      .take("Idris", 66)
      .work("Idris", 66)
      .finish("Idris", 66)
      .refuse(
        "Elif",
        65,
        "The switch breaks the neutral only: switched off, the lamp's inside stays at line voltage. It must not be plugged in. (Demo)",
      ),
    story(
      "Betje",
      {
        name: "Bicycle-light station",
        purpose: "Charges and holds lights for the repair evening",
        protectionClass: "II",
      },
      demoMaps.converterUnknown,
    )
      .draft(5)
      .submit(2),
    story(
      "Benno",
      { name: "Practice amplifier", purpose: "Guitar amplifier for the music room" },
      starter("audio-amplifier"),
    )
      .draft(120)
      .submit(118)
      .take("Ilse", 115)
      .work("Ilse", 115)
      .finish("Ilse", 115)
      .sign("Elif", 114, 365)
      .withdraw("Elif", 25, "Its builder changed the output transformer after the signature. (Demo)"),
    story(
      "Bruna",
      {
        name: "Charger for the cargo-bike pack",
        purpose: "Charges the spare pack overnight in the yard shed",
        protectionClass: "II",
      },
      starter("battery-charger"),
    )
      .draft(1)
      .submit(1),
    story(
      "Betje",
      { name: "Inverter station for the market stall", purpose: "Mains outlet from two batteries" },
      demoMaps.inverterStation,
    ).draft(2),
    story(
      "Benno",
      { name: "Speed controller for the pottery wheel", purpose: "Runs the old wheel's new motor" },
      unfinished(starter("motor-controller")),
    ).draft(0),
  ].flatMap(({ steps }) => steps);
}

const usual: UnitDetails = {
  name: "",
  purpose: "",
  placeOfUse: "Workshop, indoors, dry",
  supplyVolts: 230,
  supplyHertz: 50,
  protectionClass: "I",
  cordLengthM: 1.8,
  cordAreaMm2: 1,
  handheld: false,
  altitudeM: 120,
};

function starter(key: string): EnergyMap {
  const found = starterMaps.find((each) => each.key === key);
  if (!found) throw new Error(`There is no starter map ${key}.`);
  return found.map;
}

/** A map that its builder has not finished: the load isn't wired, a fuse and a wire are not known yet. */
function unfinished(map: EnergyMap): EnergyMap {
  return {
    ...map,
    elements: map.elements.map((each) =>
      each.id === "F2" && each.kind === "fuse" ? { ...each, ratingAmps: null } : each,
    ),
    conductors: map.conductors
      .filter(({ from, to }) => from.element !== "LD1" && to.element !== "LD1")
      .map((each) => (each.id === "W2" ? { ...each, area: null } : each)),
  };
}
