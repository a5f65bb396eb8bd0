import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, onTestFinished, test } from "vitest";
import { makeBombPng, makeJpeg } from "../fixtures/pictures";
import { expectNoAxeViolations, useBrowser } from "../helpers/browser";
import { useServer } from "../helpers/server";
import { fillSigning, type Terms } from "./walk/electrician";
import { openFirstReading } from "./walk/inspector";
import { expectMail } from "./walk/mail";
import { arrive, hydrated, open, signIn } from "./walk/person";

const variables: Record<string, string> = {};
const server = useServer({ data: "demo", variables });
const browser = useBrowser();

/** Units of the demo workshop, each used by one test. */
const units = {
  /** Nobody has it yet. */
  waiting: "Charger for the cargo-bike pack",
  /** On Ilse's bench, a third of its sheet done. */
  onBench: "Back-up box for the router",
  /** Betje's draft, with a complete map. */
  draft: "Inverter station for the market stall",
  /** Await a signature; on the second one some checks fail. */
  toSign: "Back-up box for the till",
  toSignToo: "Light strip for the stage",
};

async function numberOf(name: string): Promise<number> {
  const [row] = await server().query("SELECT number FROM units WHERE name = ?", [name]);
  return Number(row?.number);
}

const terms: Terms = {
  conditions: {
    Place: "Behind the counter, dry",
    Supply: "Its own socket with 30 mA protection",
    Load: "The till and its printer",
    Supervision: "Nobody needs to be there",
    Other: "Not on an extension lead",
  },
  recheckOn: new Date(Date.now() + 200 * 86_400_000).toISOString().slice(0, 10),
  signature: "typed",
};

test("of two inspectors who take a unit at once one has it, and the other is told who", async () => {
  browser.tolerate(/status of 409/);
  const number = await numberOf(units.waiting);
  const both = [await signIn(browser, server(), "Ilse"), await signIn(browser, server(), "Idris")];
  for (const { page, home } of both) await open(page, `${home}/bench`);
  await Promise.all(
    both.map(({ page }) => page.getByRole("button", { name: `Take unit ${number}` }).click()),
  );
  const outcomes = await Promise.all(
    both.map(async ({ page }) => {
      const took = page.getByText(`Unit ${number} is on your bench.`);
      const conflict = page.getByRole("alert").filter({ hasText: "Somebody else acted first" });
      await took.or(conflict).first().waitFor();
      await expectNoAxeViolations(page);
      return (await took.isVisible()) ? null : conflict.innerText();
    }),
  );
  const [row] = await server().query(
    "SELECT p.name FROM units u JOIN people p ON p.id = u.inspector_id WHERE u.number = ? AND u.workshop_id = 1",
    [number],
  );
  expect(outcomes.filter((told) => told === null)).toHaveLength(1);
  expect(outcomes.find((told) => told !== null)).toContain(row?.name);
});

test("an electrician whose licence lapsed yesterday is told so, and gets no form to sign", async () => {
  const { page, home } = await signIn(browser, server(), "Emeka");
  await page.goto(`${home}/signing/${await numberOf(units.toSign)}`);
  await arrive(page, units.toSign);
  const guards = page.getByRole("region", { name: "Before a signature" });
  await guards
    .getByText(/^Licence DEMO-5120 .* lapsed: its last day was \d{1,2} [A-Z][a-z]{2} \d{4}\./)
    .waitFor();
  const decision = page.getByRole("region", { name: "Decide" });
  await decision.getByText("It can’t be signed as it stands").waitFor();
  await decision
    .getByText(/lapsed/)
    .first()
    .waitFor();
  expect(await decision.getByRole("button", { name: "Sign", exact: true }).count()).toBe(0);
});

test("a signature on what somebody else sent back meanwhile is refused, and everything typed is still there", async () => {
  browser.tolerate(/status of 409/);
  const number = await numberOf(units.toSign);
  const electrician = await signIn(browser, server(), "Elif");
  await open(electrician.page, `${electrician.home}/signing/${number}`);
  await fillSigning(electrician, terms);

  const other = await signIn(browser, server(), "Emeka");
  await open(other.page, `${other.home}/signing/${number}?decide=send-back#decide`);
  await other.page.getByLabel("What stands in the way").fill("The label on its back names another unit.");
  await other.page.getByRole("button", { name: "Send it back to the builder" }).click();
  await other.page.getByText(`Unit ${number} went back to its builder`).waitFor();

  const { page } = electrician;
  await page.getByRole("button", { name: "Sign", exact: true }).click();
  const notice = page.getByRole("alert").filter({ hasText: "Somebody else acted first" });
  await notice.getByText(`Emeka Lindqvist acted on unit ${number} before you.`).waitFor();
  for (const [label, words] of Object.entries(terms.conditions)) {
    expect(await page.getByRole("textbox", { name: new RegExp(`^${label}`) }).inputValue()).toBe(words);
  }
  expect(await page.getByLabel("Recheck by").inputValue()).toBe(terms.recheckOn);
  await expectNoAxeViolations(page);
  expect(await count("decisions d JOIN units u ON u.id = d.unit_id WHERE u.number = ?", [number])).toBe(0);
});

test("a double click signs once, and a crash before the PDF leaves exactly one", async () => {
  browser.tolerate(/ERR_CONNECTION_(REFUSED|RESET)/);
  // Without a worker nothing is made before the crash; the next start has one again.
  await server().stopApp();
  variables.WORKER = "false";
  await server().startApp();
  delete variables.WORKER;
  const number = await numberOf(units.toSignToo);
  const electrician = await signIn(browser, server(), "Elif");
  const { page, home } = electrician;
  await open(page, `${home}/signing/${number}`);
  await page.getByLabel("Why it may be used all the same").fill("It is fed from a supply limited to 2 A.");
  await fillSigning(electrician, terms);
  await page.getByRole("button", { name: "Sign", exact: true }).dblclick();
  await page.waitForURL(`${home}/archive/${number}`);
  await page.getByText("The PDF is being made. It appears here by itself.").waitFor();
  await server().killApp();
  // The page that stayed open looks for the PDF in vain, and goes on looking.
  await page.waitForEvent("requestfailed");
  await expectNoAxeViolations(page);
  await server().startApp();

  await page.getByRole("link", { name: /^PDF \(/ }).waitFor();
  const ofUnit = "u.id = d.unit_id WHERE u.number = ?";
  expect(await count(`decisions d JOIN units u ON ${ofUnit}`, [number])).toBe(1);
  expect(await count(`records d JOIN units u ON ${ofUnit}`, [number])).toBe(1);
  const made = `audit_entries d JOIN units u ON ${ofUnit} AND d.act = 'record.pdf-made'`;
  expect(await count(made, [number])).toBe(1);
});

test("each file that can't be taken says why, and the others and what was typed stay", async () => {
  browser.tolerate(/status of (415|422)/);
  const { page, home } = await signIn(browser, server(), "Ilse");
  const reading = await openFirstReading(page, `${home}/bench/${await numberOf(units.onBench)}`);
  await reading.fill("0.123");
  const good = await makeJpeg();
  const folder = mkdtempSync(join(tmpdir(), "files-"));
  onTestFinished(() => rmSync(folder, { recursive: true, force: true }));
  const files = {
    "letter.jpg": Buffer.from("Dear inspector, this is no photo."),
    "cut-off.jpg": good.subarray(0, good.length / 2),
    "bomb.png": makeBombPng(20_000),
    "huge.jpg": Buffer.concat([good, Buffer.alloc(60 * 1024 * 1024)]),
    "good.jpg": good,
  };
  for (const [name, bytes] of Object.entries(files)) writeFileSync(join(folder, name), bytes);
  await page
    .getByLabel("Add photos", { exact: true })
    .setInputFiles(Object.keys(files).map((name) => join(folder, name)));

  await page.getByRole("img", { name: /good\.jpg/ }).waitFor();
  const told = (name: string) => page.getByRole("alert").filter({ hasText: name }).innerText();
  expect(await told("letter.jpg")).toContain("This is no photo that can be used");
  expect(await told("cut-off.jpg")).toContain("it is damaged or incomplete");
  expect(await told("bomb.png")).toContain("too many pixels");
  expect(await told("huge.jpg")).toContain("too large: at most 25 MB");
  expect(await page.getByRole("img", { name: /(letter|cut-off|huge)\.jpg|bomb\.png/ }).count()).toBe(0);
  expect(await reading.inputValue()).toBe("0.123");
  await expectNoAxeViolations(page);
});

test("while the file store is away an upload says so, and goes through at another try once it is back", async () => {
  browser.tolerate(/status of 503/);
  const { page, home } = await signIn(browser, server(), "Ilse");
  await openFirstReading(page, `${home}/bench/${await numberOf(units.onBench)}`);
  const picture = { name: "patient.jpg", mimeType: "image/jpeg", buffer: await makeJpeg() };
  await server().services.objectStore.stop();
  try {
    await page.getByLabel("Add photos", { exact: true }).setInputFiles(picture);
    const refusal = page.getByRole("alert").filter({ hasText: "patient.jpg" });
    await refusal.waitFor();
    expect(await refusal.innerText()).toMatch(/store|later|again/i);
    expect(await page.getByRole("img", { name: /patient\.jpg/ }).count()).toBe(0);
  } finally {
    await server().services.objectStore.startAgain();
  }
  await page.getByRole("button", { name: "Try again" }).click();
  await page.getByRole("img", { name: /patient\.jpg/ }).waitFor();
  expect(await page.getByRole("alert").count()).toBe(0);
});

test("while the mail server is away a unit is submitted all the same, and the mails come when it is back", async () => {
  const number = await numberOf(units.draft);
  const subject = `Unit ${number}, “${units.draft}” waits for the bench`;
  const { page, home } = await signIn(browser, server(), "Betje");
  await open(page, `${home}/units/${number}`);
  await server().services.mail.stop();
  try {
    await page.getByRole("button", { name: "Submit", exact: true }).click();
    await page.getByText(`Unit ${number} is submitted.`).waitFor();
    const failed = () => count("outbox WHERE subject = ? AND sent_at IS NULL AND attempts > 0", [subject]);
    await expect.poll(failed, { timeout: 30_000 }).toBe(2);
  } finally {
    await server().services.mail.startAgain();
  }
  await expectMail(server(), subject, ["ilse@demo.example", "idris@demo.example"]);
});

test("a reading sent while MariaDB is away is kept, and saved at another try without signing in again", async () => {
  // A step that the browser was fetching beforehand may be cut off in the middle.
  browser.tolerate(/status of (500|503)/);
  const { page, home } = await signIn(browser, server(), "Ilse");
  const reading = await openFirstReading(page, `${home}/bench/${await numberOf(units.onBench)}`);
  await reading.fill("0.111");
  const { mariadb } = server().services;
  await mariadb.stop();
  try {
    await page.getByRole("button", { name: "Save", exact: true }).click();
    await page.getByText("The server could not be reached, or could not save this.").waitFor();
    expect(await reading.inputValue()).toBe("0.111");
  } finally {
    await mariadb.startAgain();
  }
  await page.getByRole("button", { name: "Save", exact: true }).click();
  await page.getByRole("button", { name: "Correct this answer" }).waitFor();
  await page.getByText("0.111", { exact: false }).first().waitFor();
  await page.reload();
  await hydrated(page);
  await page.getByRole("button", { name: "Correct this answer" }).waitFor();
  expect(await page.getByText("What you had typed here before is back.").count()).toBe(0);
});

async function count(from: string, values: unknown[]): Promise<number> {
  const [row] = await server().query(`SELECT COUNT(*) AS found FROM ${from}`, values);
  return Number(row?.found);
}
