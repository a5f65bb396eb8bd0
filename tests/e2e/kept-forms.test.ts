import type { Page } from "playwright-core";
import { expect, test } from "vitest";
import { useBrowser } from "../helpers/browser";
import { useServer } from "../helpers/server";
import { makeUnit } from "./walk/builder";
import { arrive, open, type Person, signIn } from "./walk/person";

const server = useServer({ data: "demo" });
const browser = useBrowser();

const NOTICE = "What you typed here before is back; it was not sent.";

/** As when a session ends: the browser's cookie is gone, and the page doesn't know. */
async function loseSession(page: Page): Promise<void> {
  await page.context().clearCookies();
}

async function signInAgain({ page, email, password }: Person): Promise<void> {
  await arrive(page, "Sign in");
  await page.getByLabel("Mail address").fill(email);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.waitForURL(/\/w\//);
}

test("what was typed for a new unit is still there after the session ended, and gone once the unit is made", async () => {
  const person = await signIn(browser, server(), "Betje");
  const { page, home } = person;
  await open(page, `${home}/units/new`);
  await page.getByLabel("Name", { exact: true }).fill("Lamp of the reading room");
  await page.getByLabel("What it is for").fill("Light\nfor the long table.");
  await page.getByRole("radio", { name: "Class II", exact: false }).check();
  await loseSession(page);
  await page.getByRole("link", { name: "Cancel" }).click();
  await signInAgain(person);

  await open(page, `${home}/units/new`);
  await page.getByText(NOTICE).waitFor();
  expect(await page.getByLabel("Name", { exact: true }).inputValue()).toBe("Lamp of the reading room");
  expect(await page.getByLabel("What it is for").inputValue()).toBe("Light\nfor the long table.");
  expect(await page.getByRole("radio", { name: "Class II", exact: false }).isChecked()).toBe(true);

  await makeUnit(person, { name: "Lamp of the reading room", purpose: "Light.", protectionClass: "II" });
  await open(page, `${home}/units/new`);
  expect(await page.getByLabel("Name", { exact: true }).inputValue()).toBe("");
  expect(await page.getByText(NOTICE).count()).toBe(0);
});

test("a form that was sent after the session had ended is still there", async () => {
  const person = await signIn(browser, server(), "Elif");
  const { page, home } = person;
  const [unit] = await server().query("SELECT number FROM units WHERE name = 'Back-up box for the till'");
  const address = `${home}/signing/${Number(unit?.number)}?decide=send-back#decide`;
  await open(page, address);
  await page.getByLabel("What stands in the way").fill("The label on its back names another unit.");
  await loseSession(page);
  await page.getByRole("button", { name: "Send it back to the builder" }).click();
  await signInAgain(person);

  await open(page, address);
  await page.getByText(NOTICE).waitFor();
  const reason = page.getByLabel("What stands in the way");
  expect(await reason.inputValue()).toBe("The label on its back names another unit.");
  await page.getByRole("button", { name: "Start afresh" }).click();
  expect(await reason.inputValue()).toBe("");
});
