import { type Database, tables } from "~/db/client.server";
import { GENESIS_HASH } from "~/services/audit/append-entry.server";
import type { ServiceContext } from "~/services/context.server";
import {
  addInstrument,
  addRange,
  recalibrate,
  type RangeInput,
} from "~/services/instruments/instruments.server";
import { addLicence } from "~/services/people/licences.server";
import { hashPassword } from "~/services/people/passwords.server";
import type { InstrumentKind } from "~/engine/bench-check";
import { type Role } from "~/workflow/roles";
import { type DemoPerson, demoPeople } from "./people";

/** One act of a story: so many days before today, at an hour (UTC). */
export interface Step {
  daysAgo: number;
  hour: number;
  act: (at: Date) => Promise<void>;
}

/** The demo workshop as the stories see it: who acts, and when. */
export interface DemoWorkshop {
  as(firstName: string, role: Role, at: Date): ServiceContext;
  passwordOf(firstName: string): string;
}

const MAIN = {
  slug: "canal-street",
  name: "Canal Street Workshop (demo)",
  timeZone: "Europe/Berlin",
  isDemo: true,
  ruleSetKey: "eu-after-repair",
  ruleSetVersion: "1",
  accuracyPolicy: "rect" as const,
  recheckMonths: 12,
};

const SECOND = {
  ...MAIN,
  slug: "hillside-lab",
  name: "Hillside Lab (demo)",
  timeZone: "Europe/Lisbon",
  recheckMonths: 6,
};

/** Who also belongs to the second workshop, so that the switcher has something to switch. */
const SECOND_MEMBERS: Record<string, readonly Role[]> = {
  Stina: ["steward"],
  Elif: ["electrician", "builder"],
};

/**
 * Puts in what a workshop starts from: two workshops, their people, and (through the services, as the steward would)
 * licences and instruments; the yearly calibration follows as a step. All of it is invented.
 */
export async function seedWorkshop(
  db: Database,
  appUrl: string,
  start: Date,
  today: Date,
): Promise<{ workshop: DemoWorkshop; steps: Step[] }> {
  const ids = new Map<string, number>();
  for (const person of demoPeople) {
    const [row] = await db
      .insert(tables.people)
      .values({
        name: person.name,
        email: person.email,
        passwordHash: await hashPassword(person.password),
        createdAt: start,
      })
      .$returningId();
    if (row) ids.set(firstName(person), row.id);
  }
  const idOf = (name: string) => {
    const id = ids.get(name);
    if (id === undefined) throw new Error(`Nobody in the demo workshop is called ${name}.`);
    return id;
  };
  const find = (name: string) => {
    const person = demoPeople.find((each) => firstName(each) === name);
    if (!person) throw new Error(`Nobody in the demo workshop is called ${name}.`);
    return person;
  };

  const mainId = await insertWorkshop(db, MAIN, start);
  const secondId = await insertWorkshop(db, SECOND, start);
  await db.insert(tables.memberships).values([
    ...demoPeople.flatMap((person) =>
      person.roles.map((role) => ({
        workshopId: mainId,
        personId: idOf(firstName(person)),
        role,
        grantedAt: start,
      })),
    ),
    ...Object.entries(SECOND_MEMBERS).flatMap(([name, roles]) =>
      roles.map((role) => ({ workshopId: secondId, personId: idOf(name), role, grantedAt: start })),
    ),
  ]);

  const workshop: DemoWorkshop = {
    as(name, role, at) {
      const { name: fullName, email } = find(name);
      return {
        db,
        person: { id: idOf(name), name: fullName, email },
        workshop: { id: mainId, ...MAIN, roles: [role] },
        appUrl,
        now: () => at,
      };
    },
    passwordOf: (name) => find(name).password,
  };
  await seedLicences(workshop, (name) => ({ id: idOf(name), name: find(name).name }), start, today);
  return { workshop, steps: [await seedInstruments(workshop, start, today)] };
}

function firstName(person: DemoPerson): string {
  return person.name.split(" ")[0] ?? person.name;
}

async function insertWorkshop(db: Database, values: typeof MAIN, at: Date): Promise<number> {
  const [row] = await db
    .insert(tables.workshops)
    .values({ ...values, createdAt: at })
    .$returningId();
  if (!row) throw new Error("The workshop got no id.");
  await db.insert(tables.trailHeads).values({ workshopId: row.id, sequence: 0, hash: GENESIS_HASH });
  return row.id;
}

/** Elif's licence is in order; Emeka's ran out yesterday, so that the guard can be met. */
async function seedLicences(
  workshop: DemoWorkshop,
  personCalled: (name: string) => { id: number; name: string },
  start: Date,
  today: Date,
): Promise<void> {
  const steward = workshop.as("Stina", "steward", start);
  const authority = "Demo Licensing Office";
  const [elif, emeka] = [personCalled("Elif"), personCalled("Emeka")];
  await addLicence(steward, {
    personId: elif.id,
    holderName: elif.name,
    number: "DEMO-4471",
    authority,
    validFrom: day(start, -200),
    validTo: day(today, 700),
    maxSupplyVolts: 400,
    coversBatteries: true,
  });
  await addLicence(steward, {
    personId: emeka.id,
    holderName: emeka.name,
    number: "DEMO-5120",
    authority,
    validFrom: day(start, -200),
    validTo: day(today, -1),
    maxSupplyVolts: 250,
    coversBatteries: false,
  });
}

interface DemoInstrument {
  name: string;
  kind: InstrumentKind;
  ranges: RangeInput[];
  /** Calibrated again in time; the one that was not is out of calibration today. */
  keptUp: boolean;
}

const range = (
  unit: string,
  upper: number,
  percent: number,
  digits: number,
  resolution: number,
  lower = 0,
): RangeInput => ({ unit, lower, upper, percent, digits, resolution });

const demoInstruments: readonly DemoInstrument[] = [
  {
    name: "Bench low-ohm meter",
    kind: "low-ohm-meter",
    ranges: [range("Ω", 2, 2, 3, 0.001), range("Ω", 20, 2, 3, 0.01, 2)],
    keptUp: true,
  },
  {
    name: "Insulation tester",
    kind: "insulation-tester",
    ranges: [range("MΩ", 20, 3, 5, 0.01), range("MΩ", 200, 3, 5, 0.1, 20)],
    keptUp: true,
  },
  {
    name: "Leakage clamp",
    kind: "leakage-meter",
    ranges: [range("mA", 6, 3, 5, 0.001)],
    keptUp: true,
  },
  {
    name: "Bench multimeter",
    kind: "multimeter",
    ranges: [range("V", 1000, 0.5, 2, 0.01), range("A", 10, 1.2, 5, 0.001)],
    keptUp: true,
  },
  {
    name: "Digital caliper",
    kind: "caliper",
    ranges: [range("mm", 150, 0, 3, 0.01)],
    keptUp: true,
  },
  {
    name: "Storage oscilloscope",
    kind: "oscilloscope",
    ranges: [range("V", 600, 3, 1, 0.1), range("s", 10, 1, 1, 0.001)],
    keptUp: true,
  },
  {
    name: "Clamp meter",
    kind: "clamp-meter",
    ranges: [range("A", 40, 2, 5, 0.01)],
    keptUp: true,
  },
  {
    name: "Contact thermometer",
    kind: "thermometer",
    ranges: [range("°C", 200, 0.5, 1, 0.1, -20)],
    keptUp: true,
  },
  {
    name: "Old insulation tester",
    kind: "insulation-tester",
    ranges: [range("MΩ", 50, 10, 5, 0.1)],
    keptUp: false,
  },
];

async function seedInstruments(workshop: DemoWorkshop, start: Date, today: Date): Promise<Step> {
  const steward = workshop.as("Stina", "steward", start);
  const kept: { id: number; number: string }[] = [];
  let serial = 1;
  for (const { name, kind, ranges, keptUp } of demoInstruments) {
    const number = String(serial++).padStart(3, "0");
    const id = await addInstrument(steward, {
      name,
      kind,
      serial: `DEMO-${number}`,
      calibratedOn: day(start, -60),
      calibrationDue: keptUp ? day(start, 365) : day(today, -45),
      certificate: `DEMO-C-${number}/1`,
    });
    for (const each of ranges) await addRange(steward, id, each);
    if (keptUp) kept.push({ id, number });
  }
  return {
    daysAgo: 90,
    hour: 7,
    async act(at) {
      for (const { id, number } of kept) {
        await recalibrate(workshop.as("Stina", "steward", at), id, {
          calibratedOn: day(at, 0),
          calibrationDue: day(at, 365),
          certificate: `DEMO-C-${number}/2`,
        });
      }
    },
  };
}

/** The ISO day so many days after a moment. */
export function day(from: Date, days: number): string {
  return new Date(from.getTime() + days * 86_400_000).toISOString().slice(0, 10);
}
