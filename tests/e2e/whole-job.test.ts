import { expect, test } from "vitest";
import { demoPeople } from "../../local/seed/people";
import { expectNoAxeViolations, type PageOptions, tablet, useBrowser } from "../helpers/browser";
import { useServer } from "../helpers/server";
import { findInArchive, readTrail } from "./walk/archivist";
import { answerFinding, editMap, makeUnit, resubmit, startMap, submitWithPhoto } from "./walk/builder";
import { fillSigning, review, sign, withdraw } from "./walk/electrician";
import { carryOver, finish, sendBack, takeUnit, workSheet } from "./walk/inspector";
import { expectMail } from "./walk/mail";
import { arrive, goTo, signIn } from "./walk/person";
import { downloadRecord } from "./walk/record-files";

const server = useServer({ data: "demo" });
const browser = useBrowser();

interface Job {
  size: PageOptions;
  unit: { name: string; purpose: string; protectionClass: "I" | "II" };
  starter: string;
  firstEdit: { element: string; field: string; value: string };
  /** The title of a check that fails at first, and the element that its finding is about. */
  fault: { check: string; words: string; element: string };
  rework: { element: string; field: string; value: string };
  /** How the lists of changes show it. */
  changed: RegExp;
  signature: "drawn" | "typed";
}

const desk: Job = {
  size: { width: 1440, height: 900 },
  unit: {
    name: "Back-up box for the door phone",
    purpose: "Keeps the door phone going through a loss of mains",
    protectionClass: "I",
  },
  starter: "Battery back-up box",
  firstEdit: { element: "XO1", field: "Name", value: "12 V terminals for the door phone" },
  fault: {
    check: "F2 (Battery fuse) suits load, fault current and voltage",
    words: "The holder carries a 15 A blade, the map says 10 A.",
    element: "F2",
  },
  rework: { element: "F2", field: "Rated current", value: "8" },
  changed: /10( A)?\s*→\s*8\b/,
  signature: "drawn",
};

const bench: Job = {
  size: { ...tablet, touch: true },
  unit: {
    name: "Lamp over the sorting table",
    purpose: "Lights the sorting table in the reading room",
    protectionClass: "II",
  },
  starter: "Mains LED lamp",
  firstEdit: { element: "LD1", field: "Name", value: "LED board, 300 mm" },
  fault: {
    check: "S1 (Lamp switch) is rated for what it breaks",
    words: "The switch bears no marks: what it is rated for can't be seen.",
    element: "S1",
  },
  rework: { element: "S1", field: "Name", value: "Lamp switch with marks" },
  changed: /Lamp switch\s*→\s*Lamp switch with marks/,
  signature: "typed",
};

/** Some sixty pages, each looked at by axe: on a busy machine it takes its time. */
const WHOLE_JOB_MS = 420_000;

const conditions = {
  Place: "Reading room, dry, not outdoors",
  Supply: "Socket with residual-current protection, 30 mA",
  Load: "Not above the rating on its label",
  Supervision: "Somebody who was shown it is in the house",
  Other: "Unplugged over the holidays",
};

test.each([
  ["a back-up box at desks, signature drawn", desk],
  ["a lamp on tablets, signature typed", bench],
])(
  "from nothing to a signed record and its withdrawal: %s",
  async (_, job) => {
    const { unit, size } = job;

    // The builder describes it.
    const builder = await signIn(browser, server(), "Bruna", size);
    const number = await makeUnit(builder, unit);
    await startMap(builder, job.starter);
    await editMap(builder, job.firstEdit);
    await submitWithPhoto(builder, number);
    const inspectors = ["ilse@demo.example", "idris@demo.example", "betje@demo.example"];
    await expectMail(server(), `Unit ${number}, “${unit.name}” waits for the bench`, inspectors);

    // The inspector works the sheet and finds a fault.
    const inspector = await signIn(browser, server(), "Ilse", size);
    await takeUnit(inspector, number);
    await expectMail(server(), `Unit ${number}, “${unit.name}” is on the bench`, [builder.email]);
    const first = await workSheet(inspector, job.fault);
    expect(first).toContain(job.fault.check);
    await sendBack(inspector, number, "Put right what the finding says.");
    await expectMail(server(), `Unit ${number}, “${unit.name}” comes back to you`, [builder.email]);

    // The builder answers, changes the unit and its map, and submits again.
    await answerFinding(builder, number, "It is replaced by the right one; see the photo.");
    await editMap(builder, job.rework);
    expect(await resubmit(builder, number)).toMatch(job.changed);
    const again = `Unit ${number}, “${unit.name}” waits for the bench`;
    await expectMail(server(), again, [...inspectors, ...inspectors]);

    // The inspector does again what the change touches, and carries the rest over.
    await takeUnit(inspector, number);
    const changes = await carryOver(inspector);
    expect(changes.map).toMatch(job.changed);
    expect(changes.carried.length).toBeGreaterThan(0);
    expect(changes.carried).not.toContain(job.fault.check);
    const second = await workSheet(inspector);
    expect(second).toEqual(changes.again);
    await finish(inspector, "Seen: the right part, with its marks.");
    await expectMail(server(), `Unit ${number}, “${unit.name}” awaits your review`, [
      "elif@demo.example",
      "emeka@demo.example",
    ]);

    // The electrician reviews and signs.
    const electrician = await signIn(browser, server(), "Elif", size);
    await review(electrician, unit.name);
    const recheckOn = new Date(Date.now() + 200 * 86_400_000).toISOString().slice(0, 10);
    await fillSigning(electrician, { conditions, recheckOn, signature: job.signature });
    await sign(electrician, number);
    await expectMail(server(), `Unit ${number} was signed: ${unit.name}`, [builder.email, inspector.email]);

    // The record stands up to public tools.
    const printedHash = await electrician.page.locator("code").first().innerText();
    const record = await downloadRecord(electrician.page);
    expect(record.qpdf).toContain("No syntax or stream encoding errors found");
    expect(record.jsonHash).toBe(printedHash);
    const titles = [...second, ...changes.carried];
    for (const words of [
      unit.name,
      electrician.name,
      "DEMO-4471",
      printedHash,
      ...Object.values(conditions),
      ...titles,
    ])
      expect(record.text).toContain(words);

    // Anybody who scans the code sees how it stands, and nobody's name.
    const passerBy = await browser.newPage(size);
    await passerBy.goto(record.qrAddress);
    await arrive(passerBy, `Unit ${number}, ${unit.name}`);
    await passerBy.getByText("May be plugged in", { exact: true }).waitFor();
    for (const words of Object.values(conditions)) await passerBy.getByText(words).waitFor();
    const seen = await passerBy.content();
    for (const { name, email } of demoPeople) {
      for (const personal of [name, ...name.split(" "), email]) expect(seen).not.toContain(personal);
    }
    expect(seen).not.toContain("DEMO-4471");

    // The archivist finds it and reads its trail.
    const archivist = await signIn(browser, server(), "Aurel", size);
    await findInArchive(archivist, unit.name);
    const trail = await readTrail(archivist, unit.name);
    const steps = trail.filter((act) => !/recorded a reading|added a file/.test(act));
    expect(steps).toEqual([
      `${builder.name} created it`,
      `${builder.name} submitted`,
      `${inspector.name} took it on the bench`,
      `${inspector.name} raised a finding`,
      `${inspector.name} sent it back from the bench`,
      `${builder.name} answered a finding`,
      `${builder.name} submitted`,
      `${inspector.name} took it on the bench`,
      `${inspector.name} carried earlier readings over`,
      `${inspector.name} closed a finding`,
      `${inspector.name} finished the bench sheet`,
      `${electrician.name} signed`,
      "Mainsgate made the PDF of the record",
    ]);
    const readings = trail.filter((act) => act === `${inspector.name} recorded a reading or answer`);
    expect(readings).toHaveLength(first.length + second.length);
    expect(trail).toContain(`${builder.name} added a file`);

    // The electrician takes the signature back, and the code tells it at once.
    await withdraw(electrician, number, "The recall of its battery was published today.");
    await expectMail(server(), `Unit ${number} was withdrawn: ${unit.name}`, [
      builder.email,
      inspector.email,
      "emeka@demo.example",
    ]);
    await passerBy.reload();
    await passerBy.getByText("Must not be plugged in: withdrawn").waitFor();
    await expectNoAxeViolations(passerBy);
    await goTo(archivist, "Archive");
  },
  WHOLE_JOB_MS,
);
