import type { Page } from "playwright-core";
import { expect, test } from "vitest";
import { expectNoAxeViolations, tablet, useBrowser } from "../helpers/browser";
import { useServer } from "../helpers/server";
import { openFirstReading, stepChanged } from "./walk/inspector";
import { hydrated, signIn } from "./walk/person";

const server = useServer({ data: "demo" });
const browser = useBrowser();

/** On Ilse's bench in the demo, a third of its sheet done. */
async function toUndoneReading() {
  const [row] = await server().query("SELECT number FROM units WHERE name = ?", [
    "Back-up box for the router",
  ]);
  const inspector = await signIn(browser, server(), "Ilse", { ...tablet, touch: true });
  const sheet = `${inspector.home}/bench/${Number(row?.number)}`;
  const reading = await openFirstReading(inspector.page, sheet);
  return { ...inspector, sheet, reading };
}

const notice = (page: Page) => page.getByText("What you had typed here before is back. It is not saved yet.");

test("what was typed and not sent is back after another page, after a reload, and in a new window", async () => {
  const { page, reading } = await toUndoneReading();
  await reading.fill("0,27");
  await page.getByLabel("Note").fill("Measured at the stud");
  const step = page.url();

  await page.getByRole("link", { name: "Sheet", exact: true }).click();
  await page.waitForURL((url) => !url.pathname.endsWith("/check"));
  await page.goBack();
  await notice(page).waitFor();
  expect(await reading.inputValue()).toBe("0,27");
  expect(await page.getByLabel("Note").inputValue()).toBe("Measured at the stud");
  await expectNoAxeViolations(page);

  await page.reload();
  await notice(page).waitFor();
  expect(await reading.inputValue()).toBe("0,27");

  // As after a dead battery: the page was closed without leaving it.
  const again = await page.context().newPage();
  await page.close();
  await again.goto(step);
  await notice(again).waitFor();
  expect(await again.locator("input[name=value]").inputValue()).toBe("0,27");

  // Thrown away on request, it stays away.
  await again.getByRole("button", { name: "Throw it away" }).click();
  expect(await again.locator("input[name=value]").inputValue()).toBe("");
  await again.reload();
  await hydrated(again);
  expect(await again.locator("input[name=value]").inputValue()).toBe("");
  expect(await notice(again).count()).toBe(0);
});

test("each step keeps its own input while one steps on and back", async () => {
  const { page, reading } = await toUndoneReading();
  const title = page.getByRole("heading", { level: 1 });
  await reading.fill("0.11");
  const first = await title.innerText();
  await page.getByRole("link", { name: "Next", exact: true }).click();
  await stepChanged(page, first);
  const next = await title.innerText();
  await page.getByLabel("Note").fill("A note on the next step");
  await page.getByRole("link", { name: "Previous" }).click();
  await stepChanged(page, next);
  await notice(page).waitFor();
  expect(await reading.inputValue()).toBe("0.11");
  expect(await page.getByLabel("Note").inputValue()).toBe("");
});

test("arrow and bracket keys step, but not while somebody types", async () => {
  const { page, reading } = await toUndoneReading();
  const title = page.getByRole("heading", { level: 1 });
  const here = await title.innerText();
  await reading.fill("12");
  await reading.press("ArrowLeft");
  await reading.press("]");
  expect(await reading.inputValue()).toBe("1]2");
  expect(await title.innerText()).toBe(here);

  await title.click();
  await page.keyboard.press("]");
  await stepChanged(page, here);
  const next = await title.innerText();
  await page.keyboard.press("ArrowLeft");
  await stepChanged(page, next);
  await page.keyboard.press("ArrowRight");
  await stepChanged(page, here);
  await page.keyboard.press("[");
  await stepChanged(page, next);
  expect(await title.innerText()).toBe(here);
});
