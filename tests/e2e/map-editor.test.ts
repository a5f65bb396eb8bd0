import type { Page } from "playwright-core";
import { expect, test } from "vitest";
import { expectNoAxeViolations, tablet, useBrowser } from "../helpers/browser";
import { useServer } from "../helpers/server";
import { makeUnit, startMap } from "./walk/builder";
import { hydrated, open, type Person, signIn } from "./walk/person";

const server = useServer({ data: "demo" });
const browser = useBrowser();

const lamp = { name: "Lamp for trying out", purpose: "Tries out the editor", protectionClass: "II" } as const;

/** A builder with a new unit whose map was begun from the starter of the lamp. */
async function atLampMap(
  size?: Parameters<typeof signIn>[3],
): Promise<Person & { number: number; map: string }> {
  const builder = await signIn(browser, server(), "Bruna", size);
  const number = await makeUnit(builder, lamp);
  await startMap(builder, "Mains LED lamp");
  return { ...builder, number, map: builder.page.url() };
}

const saveLine = (page: Page, words: RegExp) => page.getByRole("status").filter({ hasText: words });
const saved = (page: Page) => saveLine(page, /^Saved /).waitFor();
const engine = (page: Page) => page.getByRole("region", { name: "What the engine says" });
const row = (page: Page, id: string) => page.locator(`#element-${id}`);
const openRow = (page: Page, id: string) => page.locator(`#element-${id}-open`).click();

test("drawing, answers and what is missing follow while one types; undo brings them back", async () => {
  const { page } = await atLampMap();
  await engine(page).getByText("S1 (Lamp switch) breaks line and neutral of X1").waitFor();
  await openRow(page, "S1");
  await row(page, "S1").getByLabel("Contact gap", { exact: true }).fill("1");
  await engine(page)
    .getByText(/S1 \(Lamp switch\) opens only 1 mm/)
    .waitFor();
  expect(
    await engine(page)
      .getByText(/opens 3 mm/)
      .count(),
  ).toBe(0);

  await row(page, "S1").getByLabel("Name").fill("Rocker");
  await page
    .getByRole("img", { name: /^Energy map with 6 elements/ })
    .locator("text", { hasText: "Rocker" })
    .waitFor();

  await openRow(page, "F1");
  const rating = row(page, "F1").getByLabel("Rated current", { exact: true });
  await rating.fill("one ampere");
  await row(page, "F1").getByText("This is no number.").waitFor();
  // What was there before must not stand behind the wrong words.
  await page.getByRole("region", { name: "Before submitting: 1" }).waitFor();
  await rating.fill("");
  await page.getByRole("button", { name: "F1 (Mains fuse): rated current is not known." }).waitFor();
  await expectNoAxeViolations(page);
  await page.getByRole("button", { name: /^Undo/ }).click();
  await page.getByText("Nothing stands against submitting").waitFor();
  expect(await rating.inputValue()).toBe("1");
});

test("a starter's figures are examples until they are confirmed or entered, row by row", async () => {
  const builder = await signIn(browser, server(), "Bruna");
  const { page } = builder;
  await makeUnit(builder, lamp);
  await page.getByRole("button", { name: /^Mains LED lamp/ }).click();
  const still = (id: string) =>
    page.getByRole("button", { name: new RegExp(`^${id} .*still has the starter's example figures`) });
  await still("F1").waitFor();
  await still("S1").waitFor();
  await openRow(page, "F1");
  await expectNoAxeViolations(page);
  await row(page, "F1").getByRole("button", { name: "These are my part’s figures: F1" }).click();
  await still("F1").waitFor({ state: "detached" });
  await openRow(page, "S1");
  await row(page, "S1").getByLabel("Contact gap", { exact: true }).fill("3.5");
  await still("S1").waitFor({ state: "detached" });
  expect(await row(page, "S1").getByText("example figures").count()).toBe(0);
  await saved(page);
  // The mark is part of the map: the server keeps it.
  await page.reload();
  await still("X1").waitFor();
  expect(await still("F1").count()).toBe(0);
});

test("rows are added, joined, duplicated and removed by keyboard alone", async () => {
  const { page } = await atLampMap();
  await page.getByLabel("New element").focus();
  await page.keyboard.type("Indicator");
  await page.keyboard.press("Tab");
  await page.keyboard.press("Enter");
  await expect.poll(() => page.evaluate(() => document.activeElement?.id)).toBe("element-H1-label");
  await page.keyboard.type("Power lamp");
  await page.getByRole("button", { name: /^H1 Power lamp/ }).waitFor();

  await page.getByLabel("New connection from").selectOption("PS1.+");
  await page.getByLabel("to", { exact: true }).selectOption("H1.1");
  // Suggested by the terminals, and shown before it counts.
  expect(await page.locator("#new-conductor-circuit").inputValue()).toBe("elv");
  await page.getByRole("button", { name: "Add connection" }).press("Enter");
  await expect.poll(() => page.evaluate(() => document.activeElement?.id)).toBe("conductor-W8-area");
  await page.keyboard.type("0,5");
  await saved(page);
  await page.getByRole("button", { name: "Duplicate W8" }).press("Enter");
  await page.locator("#conductor-W9").waitFor();
  await page.getByRole("button", { name: "Remove H1" }).press("Enter");
  await page.locator("#conductor-W9").waitFor({ state: "detached" });
  expect(await page.locator("#conductor-W8").count()).toBe(0);
  await page.getByRole("button", { name: "Undo: H1 and its 2 connections removed" }).click();
  await page.locator("#conductor-W9").waitFor();
});

test("a draft saves itself, and two windows never overwrite each other unseen", async () => {
  browser.tolerate(/status of 409/);
  const { page, map } = await atLampMap();
  const other = await page.context().newPage();
  await open(other, map);

  await openRow(page, "F1");
  await row(page, "F1").getByLabel("Name").fill("Fuse of the first window");
  await saved(page);
  await openRow(other, "F1");
  await row(other, "F1").getByLabel("Name").fill("Fuse of the second window");
  await other.getByText("This map was changed in two places").waitFor();
  await expectNoAxeViolations(other);
  await other.getByRole("button", { name: "See theirs" }).click();
  expect(await row(other, "F1").getByLabel("Name").inputValue()).toBe("Fuse of the first window");
  // One's own version is one step back, and is saved knowingly.
  await other.getByRole("button", { name: /^Undo/ }).click();
  await saved(other);
  await page.reload();
  await page.getByRole("button", { name: /^F1 Fuse of the second window/ }).waitFor();
});

test("without the server it says so, keeps what is typed on the device, and saves it once the server is back", async () => {
  browser.tolerate(/ERR_INTERNET_DISCONNECTED|ERR_CONNECTION_REFUSED/);
  const { page, map } = await atLampMap(tablet);
  await openRow(page, "F1");
  await page.context().setOffline(true);
  await row(page, "F1").getByLabel("Name").fill("Typed without a connection");
  await saveLine(page, /^Not saved, trying again/).waitFor();
  await page.context().setOffline(false);
  await saved(page);

  await server().stopApp();
  await row(page, "F1").getByLabel("Name").fill("Typed while the server was down");
  await saveLine(page, /^Not saved, trying again/).waitFor();
  // As after a dead battery.
  const again = await page.context().newPage();
  await page.close({ runBeforeUnload: false });
  await server().startApp();
  await open(again, map);
  await again.getByText("This device holds changes that did not reach the server").waitFor();
  await expectNoAxeViolations(again);
  await again.getByRole("button", { name: "Bring them back" }).click();
  await saved(again);
  await again.reload();
  await again.getByRole("button", { name: /^F1 Typed while the server was down/ }).waitFor();
  expect(await again.getByText("This device holds changes").count()).toBe(0);
});

test("leaving at once saves first; a refused submission leads to the very field", async () => {
  browser.tolerate(/status of 422/);
  const { page, number, home } = await atLampMap();
  await openRow(page, "F1");
  await row(page, "F1").getByRole("button", { name: "Rated current: not known" }).click();
  await page.getByRole("navigation", { name: "Unit" }).getByRole("link", { name: "Overview" }).click();
  await page.waitForURL(`${home}/units/${number}`);
  await page.getByText("The energy map is incomplete: 1 thing").waitFor();
  await page.getByRole("button", { name: "Submit", exact: true }).click();
  await page.getByText("It was not submitted").waitFor();
  await expectNoAxeViolations(page);
  await page.getByRole("link", { name: "F1 (Mains fuse): rated current is not known." }).click();
  await expect.poll(() => page.evaluate(() => document.activeElement?.id)).toBe("element-F1-ratingAmps");
  await page.keyboard.type("1");
  await page.getByText("Nothing stands against submitting").waitFor();
});

test("a map goes out as JSON and comes in again; what is wrong with one is told by row and field", async () => {
  const { page } = await atLampMap();
  const download = page.waitForEvent("download");
  await page.getByRole("button", { name: "Export JSON" }).click();
  const file = await (await download).path();
  expect((await download).suggestedFilename()).toMatch(/^unit-\d+-revision-1\.json$/);

  await page.getByRole("button", { name: "Remove F1" }).click();
  await page.getByRole("button", { name: "Import JSON" }).click();
  const dialog = page.getByRole("dialog", { name: "Import a map" });
  await dialog.getByLabel("Or paste it here").fill('{"format": "mainsgate-energy-map", "version": 1,');
  await dialog.getByRole("button", { name: "Import", exact: true }).click();
  await dialog.getByText("This is no valid JSON").waitFor();
  await dialog
    .getByLabel("Or paste it here")
    .fill(
      '{"format":"mainsgate-energy-map","version":1,"elements":[{"id":"F1","kind":"fuse"}],"conductors":[]}',
    );
  await dialog.getByRole("button", { name: "Import", exact: true }).click();
  await dialog.getByText(/^elements, number 1 \(“F1”\), label: /).waitFor();
  await expectNoAxeViolations(page);
  await dialog.getByLabel("From a file").setInputFiles(file);
  await expect.poll(() => dialog.getByLabel("Or paste it here").inputValue()).toContain('"F1"');
  await dialog.getByRole("button", { name: "Import", exact: true }).click();
  await page.getByRole("button", { name: /^F1 Mains fuse/ }).waitFor();
  await saved(page);
});

test("a draft can be discarded, and is gone from the list", async () => {
  const { page, number, home } = await atLampMap();
  await open(page, `${home}/units/${number}`);
  await page.getByRole("button", { name: "Discard the draft" }).click();
  const dialog = page.getByRole("dialog", { name: `Discard unit ${number}?` });
  await expectNoAxeViolations(page);
  await dialog.getByRole("button", { name: "Discard", exact: true }).click();
  await page.getByText(`The draft of unit ${number} is discarded.`).waitFor();
  await hydrated(page);
  expect(await page.locator(`a[href$="/units/${number}"]`).count()).toBe(0);
});

test("a connection shows its figures whole, on a desk and on an upright tablet", async () => {
  const { page } = await atLampMap();
  for (const width of [1280, 820]) {
    await page.setViewportSize({ width, height: 900 });
    for (const field of ["area", "lengthM"]) {
      const input = page.locator(`#conductor-W1-${field}`);
      await input.fill("0.125");
      const cut = await input.evaluate((each) => each.scrollWidth - each.clientWidth);
      expect(cut, `${field} at ${width}`).toBeLessThanOrEqual(0);
    }
    const from = await page.locator("#conductor-W1-from").boundingBox();
    expect(from?.width ?? 0).toBeGreaterThan(200);
  }
});
