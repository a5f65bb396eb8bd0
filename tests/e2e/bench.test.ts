import type { Page } from "playwright-core";
import { afterAll, expect, test } from "vitest";
import { openDatabase } from "~/db/client.server";
import { hashPassword } from "~/services/people/passwords.server";
import { readingCheck, type TestBench, makeBench, unitNow } from "../fixtures/bench";
import { raiseFinding } from "~/services/bench/raise-finding.server";
import { grantRoles, makeInstrument, makePerson } from "../fixtures/workshop";
import { expectNoAxeViolations, screenshot, tablet, useBrowser } from "../helpers/browser";
import { useServer } from "../helpers/server";

const server = useServer({ data: "empty" });
const browser = useBrowser();
const password = "four plain words here";

type TestDatabase = ReturnType<typeof openDatabase>;
let opened: TestDatabase | undefined;
const db = () => (opened ??= openDatabase(server().services.variables.DATABASE_URL ?? ""));
afterAll(() => opened?.close());

/** Calibrations and dates of the fixtures lie around their fixed moment; the server's clock is today's. */
const farDue = { calibratedOn: "2020-01-01", calibrationDue: "2099-12-31" };

async function bench(options: Parameters<typeof makeBench>[1] = {}): Promise<TestBench & { home: string }> {
  const made = await makeBench(db(), options, { passwordHash: await hashPassword(password) });
  const ids = Object.values(made.instrumentOf);
  await server().query("UPDATE instruments SET calibrated_on = ?, calibration_due = ? WHERE id IN (?)", [
    farDue.calibratedOn,
    farDue.calibrationDue,
    ids,
  ]);
  return { ...made, home: `${server().address}/w/${made.workshop.slug}` };
}

async function signedIn(email: string): Promise<Page> {
  const page = await browser.newPage({ ...tablet, touch: true });
  await page.goto(`${server().address}/sign-in`);
  await page.getByLabel("Mail address").fill(email);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.waitForURL(/\/w\//);
  return page;
}

function stepOf({ home, unit }: { home: string; unit: { number: number } }, key: string): string {
  return `${home}/bench/${unit.number}/check?${new URLSearchParams({ key }).toString()}`;
}

/** A share of a limit, as somebody would type it. */
const shareOf = (check: { limit: { value: number } }, share: number) =>
  String(Number((check.limit.value * share).toPrecision(3)));

const value = (page: Page) => page.locator("input[name=value]");
const save = (page: Page) => page.getByRole("button", { name: "Save", exact: true });
const corrected = (page: Page) => page.getByRole("button", { name: "Correct this answer" });
/** The page is alive once React has taken it over: the typed value is then judged. */
const verdict = (page: Page, word: string) =>
  page.locator("[aria-live=polite] [data-verdict]", { hasText: word }).waitFor();

test("a reading is judged while it is typed, survives leaving the page, and is saved and corrected", async () => {
  browser.tolerate(/status of 422/);
  const made = await bench();
  const inspector = made.as("inspector");
  const check = await readingCheck(inspector, made.unit.number);
  const page = await signedIn(made.people.inspector.email);
  await page.goto(stepOf(made, check.key));
  await page.getByText("Enter the reading. A blank is never taken as nought.").waitFor();
  await expectNoAxeViolations(page);

  await value(page).fill(shareOf(check, 3));
  await verdict(page, "Fail");
  await value(page).fill(shareOf(check, 1));
  await verdict(page, "Undecided");
  // A comma is how half of Europe writes it.
  const good = shareOf(check, 0.5).replace(".", ",");
  await value(page).fill(good);
  await verdict(page, "Pass");

  await page.goto(`${made.home}/bench`);
  await page.goto(stepOf(made, check.key));
  await page.getByText("What you had typed here before is back.").waitFor();
  expect(await value(page).inputValue()).toBe(good);
  await save(page).click();
  await corrected(page).click();

  // Without a reason a correction is refused, and what was typed stays.
  await value(page).fill(shareOf(check, 0.25));
  await save(page).click();
  await page.getByText("Say why the earlier answer is being corrected").waitFor();
  expect(await value(page).inputValue()).toBe(shareOf(check, 0.25));
  await page.getByLabel("Why the earlier answer is corrected").fill("Leads were not nulled");
  await save(page).click();
  await page.getByText("1 earlier answer").waitFor();
  await expectNoAxeViolations(page);
  await screenshot(page, "bench-step-corrected");
});

test("of two forms for one check the later one is told of the first, and keeps what it holds", async () => {
  browser.tolerate(/status of 409/);
  const made = await bench();
  const check = await readingCheck(made.as("inspector"), made.unit.number);
  const first = await signedIn(made.people.inspector.email);
  const second = await signedIn(made.people.inspector.email);
  for (const page of [first, second]) {
    await page.goto(stepOf(made, check.key));
    await page.getByText("Enter the reading.").waitFor();
    await value(page).fill(shareOf(check, 0.5));
    await verdict(page, "Pass");
  }
  await save(first).click();
  await corrected(first).waitFor();
  await value(second).fill(shareOf(check, 0.33));
  await save(second).click();
  await second.getByText("Somebody else acted first").waitFor();
  expect(await value(second).inputValue()).toBe(shareOf(check, 0.33));
  await second.getByRole("link", { name: "Show the present state" }).click();
  // The answer of the first form stands above, the typed one waits in the form below it.
  await second.getByText("A correction is a new answer").waitFor();
  expect(await value(second).inputValue()).toBe(shareOf(check, 0.33));
});

test("a lost connection is told beside the form, and the same press works when it is back", async () => {
  browser.tolerate(/ERR_INTERNET_DISCONNECTED|Failed to fetch/);
  const made = await bench();
  const check = await readingCheck(made.as("inspector"), made.unit.number);
  const page = await signedIn(made.people.inspector.email);
  await page.goto(stepOf(made, check.key));
  await page.getByText("Enter the reading.").waitFor();
  await value(page).fill(shareOf(check, 0.5));
  await verdict(page, "Pass");
  await page.context().setOffline(true);
  await save(page).click();
  await page.getByText("The server could not be reached").waitFor();
  expect(await value(page).inputValue()).toBe(shareOf(check, 0.5));
  await page.context().setOffline(false);
  await save(page).click();
  await corrected(page).waitFor();
});

test("brackets step through the sheet, but not while something is typed", async () => {
  const made = await bench();
  const check = await readingCheck(made.as("inspector"), made.unit.number);
  const page = await signedIn(made.people.inspector.email);
  await page.goto(stepOf(made, check.key));
  await page.getByText("Enter the reading.").waitFor();
  await value(page).fill("1");
  await value(page).press("ArrowRight");
  await value(page).press("]");
  expect(await value(page).inputValue()).toBe("1]");
  expect(page.url()).toBe(stepOf(made, check.key));
  await value(page).blur();
  await page.keyboard.press("]");
  await page.waitForURL((url) => url.searchParams.get("key") !== check.key);
  await page.getByRole("heading", { level: 1, name: check.title }).waitFor({ state: "hidden" });
  await page.keyboard.press("ArrowLeft");
  await page.waitForURL(stepOf(made, check.key));
  // What was typed before is still there, and belongs to this check alone.
  await page.getByText("What you had typed here before is back.").waitFor();
});

test("an instrument out of calibration can't be chosen, and says why", async () => {
  const made = await bench();
  const check = await readingCheck(made.as("inspector"), made.unit.number);
  await makeInstrument(db(), made, {
    name: "Old meter",
    kind: check.asks.instrument.kind,
    calibratedOn: "2020-01-01",
    calibrationDue: "2021-01-01",
  });
  const page = await signedIn(made.people.inspector.email);
  await page.goto(stepOf(made, check.key));
  const option = page.locator("select[name=instrumentId] option", { hasText: "Old meter" });
  expect(await option.textContent()).toContain("OUT OF CALIBRATION since 1 Jan 2021");
  expect(await option.isDisabled()).toBe(true);
});

test("of two inspectors who press “Take” for one unit the second learns who has it", async () => {
  browser.tolerate(/status of 409/);
  const made = await bench({ state: "submitted", inspectorId: null });
  const second = await makePerson(db(), { name: "Ines Second", passwordHash: await hashPassword(password) });
  await grantRoles(db(), made.workshop.id, second.id, ["inspector"]);
  const pages = [await signedIn(made.people.inspector.email), await signedIn(second.email)];
  for (const page of pages) {
    await page.goto(`${made.home}/bench`);
    await expectNoAxeViolations(page);
  }
  const [mine, theirs] = pages;
  await mine?.getByRole("button", { name: `Take unit ${made.unit.number}` }).click();
  await mine?.getByText("The builder has been told.").waitFor();
  await theirs?.getByRole("button", { name: `Take unit ${made.unit.number}` }).click();
  await theirs
    ?.getByText(`${made.people.inspector.name} acted on unit ${made.unit.number} before you.`)
    .waitFor();
  expect((await unitNow(made.as("inspector"), made.unit.number)).inspectorId).toBe(made.people.inspector.id);
});

test("a sheet that isn't done can't be finished, and without a finding it can't be sent back", async () => {
  browser.tolerate(/status of 422/);
  const made = await bench();
  const page = await signedIn(made.people.inspector.email);
  await page.goto(`${made.home}/bench/${made.unit.number}`);
  await expectNoAxeViolations(page);
  await page.getByRole("link", { name: "Finish or send back" }).click();
  await page.getByRole("heading", { name: "Finish or send back" }).waitFor();
  await expectNoAxeViolations(page);
  await page.getByRole("button", { name: "Finish the sheet" }).click();
  await page.getByText("The sheet can’t be finished yet").waitFor();
  await page.getByLabel("Why it goes back").fill("The strain relief is loose");
  await page.getByRole("button", { name: "Send it back to the builder" }).click();
  await page.getByText("Raise at least one finding first").waitFor();
  expect(await page.getByLabel("Why it goes back").inputValue()).toBe("The strain relief is loose");

  await page.getByRole("button", { name: "Raise a finding" }).click();
  await page.getByLabel("Defect").check();
  await page.getByLabel("What is wrong").fill("The cord can be pulled out");
  await page.getByLabel("On which element").selectOption({ index: 1 });
  await page.getByRole("button", { name: "Raise it" }).click();
  await page.getByText("1 open finding goes with it.").waitFor();
  await page.getByRole("button", { name: "Send it back to the builder" }).click();
  await page.getByText("went back to its builder").waitFor();
  expect(await unitNow(made.as("inspector"), made.unit.number)).toMatchObject({
    state: "sent_back",
    revision: 2,
  });
});

/** How far the page reaches beyond its window, in px. */
const overhang = (page: Page) =>
  page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);

test("on an upright tablet the queue's button to take a unit is on the screen", async () => {
  const made = await bench({ state: "submitted" });
  const page = await signedIn(made.people.inspector.email);
  await page.goto(`${made.home}/bench`);
  const box = await page.getByRole("button", { name: `Take unit ${made.unit.number}` }).boundingBox();
  if (!box) throw new Error("There is no button.");
  expect(box.x).toBeGreaterThanOrEqual(0);
  expect(box.x + box.width).toBeLessThanOrEqual(tablet.width);
  expect(box.height).toBeGreaterThanOrEqual(44);
  expect(await overhang(page)).toBe(0);
  await expectNoAxeViolations(page);
});

test("one endless word in a finding widens no page of the bench", async () => {
  const made = await bench();
  const inspector = made.as("inspector");
  const check = await readingCheck(inspector, made.unit.number);
  await raiseFinding(inspector, {
    unitNumber: made.unit.number,
    severity: "danger",
    text: "W".repeat(300),
    checkKey: check.key,
    elementId: null,
  });
  const page = await signedIn(made.people.inspector.email);
  for (const path of [
    `${made.home}/bench/${made.unit.number}`,
    `${made.home}/bench/${made.unit.number}/close`,
    stepOf(made, check.key),
    stepOf(made, "operation"),
  ]) {
    await page.goto(path);
    await page
      .getByText(/W{300}/)
      .first()
      .waitFor();
    expect(await overhang(page), path).toBe(0);
  }
});

test("a step with mains on says first what forbids mains, and takes no answer without a reason", async () => {
  browser.tolerate(/status of 422/);
  const made = await bench();
  const page = await signedIn(made.people.inspector.email);
  await page.goto(stepOf(made, "operation"));
  const warning = page.getByRole("note", { name: "Do not connect mains:" });
  await warning
    .getByText(/: not done yet\.$/)
    .first()
    .waitFor();
  await expectNoAxeViolations(page);
  await page.getByRole("region", { name: "What you found" }).getByRole("radio").first().check();
  await save(page).click();
  await page.getByText(/^Do not connect mains: .* If it was right all the same, say why\.$/).waitFor();
  await page.getByLabel("Why mains is connected all the same").fill("Behind an isolating transformer");
  await save(page).click();
  await corrected(page).waitFor();
  await page.getByText("Behind an isolating transformer").waitFor();
});

test("the printed sheet fits its paper and shows what is folded up", async () => {
  const made = await bench();
  const page = await signedIn(made.people.inspector.email);
  await page.goto(`${made.home}/bench/${made.unit.number}`);
  await page.emulateMedia({ media: "print" });
  // A4 upright less its margins, at 96 px to the inch.
  await page.setViewportSize({ width: 688, height: 1000 });
  const far = await page.evaluate(() =>
    [...document.querySelectorAll("main *")]
      .filter((each) => each.getClientRects().length > 0 && !each.closest(".sr-only"))
      .filter((each) => each.getBoundingClientRect().right > innerWidth + 1)
      .map((each) => `${each.tagName} ${each.className.toString()}`),
  );
  expect(far).toEqual([]);
  const folded = page.locator("main details:not([open]) table");
  expect(await folded.count()).toBeGreaterThan(0);
  expect(await folded.first().isVisible()).toBe(true);
});
