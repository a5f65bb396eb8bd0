import type { Locator, Page } from "playwright-core";
import { expect } from "vitest";
import { expectNoAxeViolations } from "../../helpers/browser";
import { arrive, goTo, open, type Person } from "./person";
import { addPhoto } from "./photo";

/** Takes a unit from the queue: by its row there. */
export async function takeUnit(inspector: Person, number: number): Promise<void> {
  const { page } = inspector;
  await goTo(inspector, "Bench");
  await page.getByRole("button", { name: `Take unit ${number}` }).click();
  await page.waitForURL(new RegExp(`/bench/${number}$`));
  await page.getByText(`Unit ${number} is on your bench.`).waitFor();
  await expectNoAxeViolations(page);
}

export interface Fault {
  /** Title of the check that fails. */
  check: string;
  /** What is wrong, as the finding says it. */
  words: string;
  element: string;
}

/**
 * Works the open sheet from the first step that is to be done to the last: examines, measures on the good side of each
 * limit, adds the photos that are asked for. On the faulty check the answer is no, and a finding with a photo is raised.
 * @returns the titles of the checks that were done, in order
 */
export async function workSheet({ page }: Person, fault?: Fault): Promise<string[]> {
  await page.getByRole("link", { name: /^(Begin|Go on)$/ }).click();
  const done: string[] = [];
  for (;;) {
    const steps = page.getByRole("navigation", { name: "Steps" });
    await steps.waitFor();
    await expectNoAxeViolations(page);
    const title = await page.getByRole("heading", { level: 1 }).innerText();
    if (done.length === 0) await stepByKeys(page);
    if (await page.getByText("The required photo is missing.").isVisible()) {
      await addPhoto(page, "Add photos", `step-${done.length}.jpg`);
      await page.getByText("The required photo is missing.").waitFor({ state: "hidden" });
    }
    if (title === fault?.check) await raiseFinding(page, fault);
    await answer(page, title === fault?.check);
    done.push(title);
    const goOn = page.getByRole("button", { name: "Save and go on" });
    if (await goOn.isVisible()) {
      await goOn.click();
      await stepChanged(page, title);
      continue;
    }
    await page.getByRole("button", { name: "Save", exact: true }).click();
    await page.getByRole("button", { name: "Correct this answer" }).waitFor();
    return done;
  }
}

/** Waits until another step than the one with that title is shown: the address changes before the page does. */
export async function stepChanged(page: Page, from: string): Promise<void> {
  await expect
    .poll(() => page.getByRole("heading", { level: 1 }).innerText(), { timeout: 30_000 })
    .not.toBe(from);
}

/** Next and previous by the keyboard, in both ways of writing them, and back where one was. */
async function stepByKeys(page: Page): Promise<void> {
  const title = () => page.getByRole("heading", { level: 1 }).innerText();
  const first = await title();
  for (const [forward, back] of [
    ["]", "["],
    ["ArrowRight", "ArrowLeft"],
  ] as const) {
    await page.keyboard.press(forward);
    await stepChanged(page, first);
    await page.keyboard.press(back);
    await expect.poll(title, { timeout: 30_000 }).toBe(first);
  }
}

async function answer(page: Page, fails: boolean): Promise<void> {
  const verdict = fails ? "Fail" : "Pass";
  if (await page.getByRole("region", { name: "Reading" }).isVisible()) {
    const limit = await page.getByRole("region", { name: "Limit" }).locator("p").first().innerText();
    const [, quantity = "", how, value, upper] =
      /^(.*): (?:(at most|at least) )?([\d.]+)(?: to ([\d.]+))?/.exec(limit) ?? [];
    const share = how === "at most" ? 0.45 : 2;
    const reading = upper === undefined ? Number(value) * share : (Number(value) + Number(upper)) / 2;
    await page.getByRole("textbox", { name: quantity }).fill(String(Number(reading.toPrecision(3))));
    expect(await page.getByLabel("Instrument", { exact: true }).inputValue(), limit).not.toBe("");
  } else {
    const choices = page.getByRole("region", { name: "What you found" }).getByRole("radio");
    await choices.nth(fails ? 1 : 0).check();
  }
  const whyMains = page.getByLabel("Why mains is connected all the same");
  if (await whyMains.isVisible()) await whyMains.fill("Behind an isolating transformer, from a distance.");
  // Told before it is saved, by the same computation as on the server.
  await page.locator("[aria-live=polite]").getByText(verdict, { exact: true }).waitFor();
}

async function raiseFinding(page: Page, { words, element }: Fault): Promise<void> {
  await page.getByRole("button", { name: "Raise a finding" }).click();
  await page.getByRole("radio", { name: /^Danger/ }).check();
  await page.getByLabel("What is wrong").fill(words);
  await page.getByLabel("On which element").selectOption(element);
  await page.getByRole("button", { name: "Raise it" }).click();
  await page.getByText("Finding 1", { exact: true }).waitFor();
  await addPhoto(page, "Add photos of it", "fault.jpg");
}

export async function sendBack({ page }: Person, number: number, reason: string): Promise<void> {
  await page.getByRole("link", { name: "Sheet", exact: true }).click();
  await expectNoAxeViolations(page);
  await page.getByRole("link", { name: "Finish or send back" }).click();
  await arrive(page, "Finish or send back");
  await page.getByText("1 open finding goes with it.").waitFor();
  await page.getByLabel("Why it goes back").fill(reason);
  await page.getByRole("button", { name: "Send it back to the builder" }).click();
  await page.getByText(`Unit ${number} went back to its builder`).waitFor();
  await arrive(page, "Bench");
}

export interface Changes {
  /** What the page says of the map. */
  map: string;
  /** Titles to be done again, and titles that were carried over. */
  again: string[];
  carried: string[];
}

/** Looks at what changed since the earlier revision, and carries over all that the change can't affect. */
export async function carryOver({ page }: Person): Promise<Changes> {
  await page.getByRole("link", { name: "What changed" }).click();
  await arrive(page, /^What changed from revision 1 to 2$/);
  const map = await page.getByRole("region", { name: "In the map and the facts" }).innerText();
  const again = await page
    .getByRole("region", { name: /^To be done again/ })
    .getByRole("link")
    .allInnerTexts();
  const may = page.getByRole("region", { name: /^May be carried over/ });
  const boxes = may.getByRole("checkbox");
  const carried: string[] = [];
  for (const box of await boxes.all()) {
    await box.check();
    carried.push(await box.locator("xpath=..").locator(".font-medium").first().innerText());
  }
  await page.getByRole("button", { name: "Carry over what is ticked" }).click();
  await page.getByText(/answers? (was|were) carried over\./).waitFor();
  await arrive(page, /^What changed/);
  await page.getByRole("link", { name: "Whole sheet" }).click();
  await expectNoAxeViolations(page);
  return { map, again, carried };
}

/** Closes the finding and finishes the sheet. */
export async function finish({ page }: Person, words: string): Promise<void> {
  await page.getByRole("link", { name: "Sheet", exact: true }).click();
  await page.getByRole("link", { name: "Finish or send back" }).click();
  await arrive(page, "Finish or send back");
  await page.getByRole("button", { name: "Close finding 1…" }).click();
  await page.getByLabel("What you saw that lets you close finding 1").fill(words);
  await page.getByRole("button", { name: "Close it for good" }).click();
  await page.getByText("closed it:").waitFor();
  await page.getByText("Every check is decided and every required photo is there.").waitFor();
  await arrive(page, "Finish or send back");
  await page.getByRole("button", { name: "Finish the sheet" }).click();
  await page.waitForURL(/\/bench$/);
  await arrive(page, "Bench");
}

/**
 * Opens, from the sheet at that address, the first step without an answer that asks for a reading.
 * @returns the field for the reading
 */
export async function openFirstReading(page: Page, sheet: string): Promise<Locator> {
  await open(page, sheet);
  const line = page
    .getByRole("row")
    .filter({ has: page.getByText("Not done yet") })
    .filter({ hasNot: page.getByText("by eye and hand") });
  await line.first().getByRole("rowheader").getByRole("link").click();
  await page.getByRole("region", { name: "Reading" }).waitFor();
  return page.getByRole("region", { name: "Reading" }).locator("input[name=value]");
}
