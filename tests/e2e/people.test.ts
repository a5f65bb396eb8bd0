import type { Page } from "playwright-core";
import { expect, test } from "vitest";
import { openDatabase } from "~/db/client.server";
import { hashPassword } from "~/services/people/passwords.server";
import { desktop, expectNoAxeViolations, screenshot, tablet, useBrowser } from "../helpers/browser";
import { useServer } from "../helpers/server";
import { grantRoles, makePerson, makeWorkshop } from "../fixtures/workshop";

const server = useServer({ data: "empty" });
const browser = useBrowser();
const password = "four plain words here";

/** A workshop with a steward and one more person, both with {@link password}. */
async function workshop() {
  const db = openDatabase(server().services.variables.DATABASE_URL ?? "");
  const passwordHash = await hashPassword(password);
  const made = await makeWorkshop(db, { passwordHash });
  const second = await makePerson(db, { name: "Second Steward", passwordHash });
  await grantRoles(db, made.workshop.id, second.id, ["steward"]);
  await db.close();
  return { ...made, second, home: `${server().address}/w/${made.workshop.slug}` };
}

async function signIn(page: Page, email: string, as = password) {
  await page.goto(`${server().address}/sign-in`);
  await fillSignIn(page, email, as);
}

async function fillSignIn(page: Page, email: string, as: string) {
  await page.getByLabel("Mail address").fill(email);
  await page.getByLabel("Password").fill(as);
  await page.getByRole("button", { name: "Sign in" }).click();
}

/** The link in the newest mail to somebody, once it has arrived. */
async function mailedLink(email: string, path: string): Promise<string> {
  const find = async () => {
    const mail = (await server().messages()).find(({ to }) => to.includes(email));
    return new RegExp(`${server().address}/${path}/[\\w-]+`).exec(mail?.text ?? "")?.[0];
  };
  await expect.poll(find, { timeout: 15_000 }).toBeDefined();
  return (await find()) ?? "";
}

test("signing in leads to where one wanted to go; a wrong password is told and loses nothing", async () => {
  browser.tolerate(/status of 401/);
  const { home, people } = await workshop();
  const page = await browser.newPage();
  await page.goto(`${home}/people?q=second`);
  await expectNoAxeViolations(page);
  await fillSignIn(page, people.steward.email, "not my password at all");
  await page.getByText("Mail and password don’t belong together.").waitFor();
  expect(await page.getByLabel("Mail address").inputValue()).toBe(people.steward.email);
  await fillSignIn(page, people.steward.email, password);
  await page.waitForURL(`${home}/people?q=second`);
  await page.getByRole("link", { name: "Second Steward" }).waitFor();
});

test("an address that leads elsewhere is not followed after signing in", async () => {
  const { people } = await workshop();
  const page = await browser.newPage();
  await page.goto(`${server().address}/sign-in?to=//elsewhere.example/`);
  await fillSignIn(page, people.builder.email, password);
  await page.getByRole("heading", { name: "What waits for you" }).waitFor();
  expect(new URL(page.url()).origin).toBe(server().address);
});

test("after five wrong passwords the sixth try is refused with words, even if it is right", async () => {
  browser.tolerate(/status of (401|429)/);
  const { people } = await workshop();
  const page = await browser.newPage();
  await page.goto(`${server().address}/sign-in`);
  for (let i = 0; i < 5; i++) {
    const answer = page.waitForResponse((response) => response.request().method() === "POST");
    await fillSignIn(page, people.archivist.email, `wrong number ${i} of five`);
    expect((await answer).status()).toBe(401);
  }
  const answer = page.waitForResponse((response) => response.request().method() === "POST");
  await fillSignIn(page, people.archivist.email, password);
  expect((await answer).status()).toBe(429);
  await page.getByText("Too many failed tries. Wait 15 minutes").waitFor();
});

test("a steward invites somebody, who joins by the mailed link and sees what the role allows", async () => {
  const { home, people, workshop: ours } = await workshop();
  const steward = await browser.newPage(desktop);
  await signIn(steward, people.steward.email);
  await steward.getByRole("link", { name: "People" }).first().click();
  await steward.getByLabel("Name", { exact: true }).fill("Ida Newcomer");
  await steward.getByLabel("Mail address").fill("ida@test.example");
  await steward.getByRole("button", { name: "Invite" }).click();
  await steward.getByText("Choose at least one role.").first().waitFor();
  await steward.getByLabel("Builder", { exact: false }).check();
  await steward.getByRole("button", { name: "Invite" }).click();
  await steward.getByText("ida@test.example is invited").waitFor();
  await expectNoAxeViolations(steward);
  await screenshot(steward, "people/steward-invites");

  const newcomer = await browser.newPage(tablet);
  const link = await mailedLink("ida@test.example", "invitation");
  await newcomer.goto(link);
  await newcomer.getByRole("heading", { name: `Join ${ours.name}` }).waitFor();
  await expectNoAxeViolations(newcomer);
  await newcomer.getByLabel("Choose a password").fill("short");
  await newcomer.getByRole("button", { name: "Join the workshop" }).click();
  await newcomer.getByText("Take at least 12 characters", { exact: false }).first().waitFor();
  expect(await newcomer.getByLabel("Your name").inputValue()).toBe("Ida Newcomer");
  await newcomer.getByLabel("Choose a password").fill("a horse eats batteries");
  await newcomer.getByRole("button", { name: "Join the workshop" }).click();
  await newcomer.waitForURL(home);
  await newcomer.getByText(`Welcome to ${ours.name}.`).waitFor();
  await expectNoAxeViolations(newcomer);
  expect(await newcomer.getByRole("link", { name: "People" }).count()).toBe(0);

  browser.tolerate(/status of (403|404)/);
  await newcomer.goto(`${home}/people`);
  await newcomer.getByText("This needs the role steward.").waitFor();
  const again = await browser.newPage();
  await again.goto(link);
  await again.getByRole("heading", { name: "This invitation no longer counts" }).waitFor();
});

test("a forgotten password is set anew by the mailed link, once", async () => {
  const { people, home } = await workshop();
  const page = await browser.newPage();
  await page.goto(`${server().address}/sign-in`);
  await page.getByRole("link", { name: "Forgotten your password?" }).click();
  await page.getByRole("heading", { name: "Forgotten your password?" }).waitFor();
  await page.getByLabel("Mail address").fill(people.inspector.email);
  await expectNoAxeViolations(page);
  await page.getByRole("button", { name: "Send the link" }).click();
  await page.getByRole("heading", { name: "Look at your mail" }).waitFor();
  const link = await mailedLink(people.inspector.email, "reset");
  await page.goto(link);
  await expectNoAxeViolations(page);
  await page.getByLabel("New password").fill("batteries eat no horses");
  await page.getByRole("button", { name: "Set the password" }).click();
  await page.getByText("Your new password is set").waitFor();
  await fillSignIn(page, people.inspector.email, "batteries eat no horses");
  await page.waitForURL(home);
  browser.tolerate(/status of 404/);
  await page.goto(link);
  await page.getByRole("heading", { name: "This link no longer works" }).waitFor();
});

test("roles are changed, a stale form is told, and a removed person is out at the next page", async () => {
  const { home, people, second } = await workshop();
  const [first, other, removed] = [await browser.newPage(), await browser.newPage(), await browser.newPage()];
  await signIn(removed, people.builder.email);
  await removed.waitForURL(home);
  await signIn(first, people.steward.email);
  await signIn(other, second.email);
  for (const page of [first, other]) {
    await page.waitForURL(home);
    await page.goto(`${home}/people/${people.builder.id}`);
    await page.getByLabel("Inspector", { exact: false }).waitFor();
  }
  await first.getByLabel("Inspector", { exact: false }).check();
  await first.getByRole("button", { name: "Save the roles" }).click();
  await first.getByText("The roles of Test builder are changed.").waitFor();

  browser.tolerate(/status of (404|409|422)/);
  await other.getByLabel("Archivist", { exact: false }).check();
  await other.getByRole("button", { name: "Save the roles" }).click();
  await other.getByText("Somebody else acted first").waitFor();
  expect(await other.getByLabel("Archivist", { exact: false }).isChecked()).toBe(true);
  await expectNoAxeViolations(other);

  await first.getByRole("button", { name: "Remove from the workshop" }).click();
  await expectNoAxeViolations(first);
  await first.getByRole("button", { name: "Remove", exact: true }).click();
  await first.getByText("Test builder is no longer in the workshop.").waitFor();
  await removed.goto(`${home}/units`);
  await removed.getByText("There is no such workshop among yours.").waitFor();
});

test("sessions are listed and ended by their owner, and changing the password ends the others", async () => {
  const { people, home } = await workshop();
  const [here, elsewhere] = [await browser.newPage(), await browser.newPage(tablet)];
  for (const page of [here, elsewhere]) {
    await signIn(page, people.electrician.email);
    await page.waitForURL(home);
  }
  await here.goto(`${server().address}/account`);
  await expectNoAxeViolations(here);
  expect(await here.getByRole("row").count()).toBe(3);
  await here.getByRole("button", { name: /^End/ }).click();
  await here.getByText("That session is ended.").waitFor();
  await elsewhere.goto(home);
  await elsewhere.getByRole("heading", { name: "Sign in" }).waitFor();

  await fillSignIn(elsewhere, people.electrician.email, password);
  await elsewhere.waitForURL(home);
  browser.tolerate(/status of 401/);
  await here.getByLabel("Current password").fill("not my password at all");
  await here.getByLabel("New password").fill("volts and amperes galore");
  await here.getByRole("button", { name: "Change the password" }).click();
  await here.getByText("That is not your password.").waitFor();
  await here.getByLabel("Current password").fill(password);
  await here.getByLabel("New password").fill("volts and amperes galore");
  await here.getByRole("button", { name: "Change the password" }).click();
  await here.getByText("Your password is changed").waitFor();
  await screenshot(here, "people/account");
  await elsewhere.goto(home);
  await elsewhere.getByRole("heading", { name: "Sign in" }).waitFor();
});

test("a steward keeps licences, instruments and settings", async () => {
  const { home, people, workshop: ours } = await workshop();
  const page = await browser.newPage(tablet);
  await signIn(page, people.steward.email);
  await page.waitForURL(home);

  await page.goto(`${home}/licences`);
  await page.getByLabel("Electrician").selectOption({ label: "Test electrician" });
  await page.getByLabel("Holder’s name").fill("Tess Electrician");
  await page.getByLabel("Number").fill("E-77");
  await page.getByLabel("Issued by").fill("Test Authority");
  await page.getByLabel("Counts from").fill("2026-01-01");
  await page.getByLabel("Counts until").fill("2025-12-31");
  await page.getByLabel("Supply up to").fill("400");
  await page.getByRole("button", { name: "Record the licence" }).click();
  await page.getByText("The last day lies before the first.").first().waitFor();
  await page.getByLabel("Counts until").fill("2099-12-31");
  await page.getByRole("button", { name: "Record the licence" }).click();
  await page.getByText("The licence is recorded.").waitFor();
  await page.getByText("Counts today").waitFor();
  await page.getByText("Tess Electrician (Test electrician here)").first().waitFor();
  await expectNoAxeViolations(page);

  await page.goto(`${home}/instruments/new`);
  await page.getByLabel("Name").fill("Bench meter 1");
  await page.getByLabel("Kind").selectOption("insulation-tester");
  await page.getByLabel("Serial number").fill("SN-1");
  await page.getByLabel("Calibrated on").fill("2026-01-01");
  await page.getByLabel("Counts until").fill("2099-01-01");
  await page.getByLabel("Certificate").fill("C-1");
  await page.getByRole("button", { name: "Add the instrument" }).click();
  await page.getByText("The instrument is added.").waitFor();
  await page.getByLabel("From").fill("0,1");
  await page.getByLabel("To", { exact: true }).fill("200");
  await page.getByLabel("Unit").selectOption("MΩ");
  await page.getByLabel("Of the reading").fill("3");
  await page.getByLabel("Digits").fill("5");
  await page.getByLabel("One digit is").fill("0.01");
  await page.getByRole("button", { name: "Add the range" }).click();
  await page.getByText("0.1 to 200 MΩ").first().waitFor();
  await expectNoAxeViolations(page);

  await page.goto(`${home}/settings`);
  expect(await page.getByLabel("Name of the workshop").inputValue()).toBe(ours.name);
  await page.getByLabel("Time zone").selectOption("Europe/Lisbon");
  await page.getByLabel("Recheck after").fill("6");
  await page.getByRole("button", { name: "Save the settings" }).click();
  await page.getByText("The settings are saved.").waitFor();
  expect(await page.getByLabel("Recheck after").inputValue()).toBe("6");
  await expectNoAxeViolations(page);
});

test("signing in works without JavaScript", async () => {
  const { home, people } = await workshop();
  const page = await browser.newPage({ ...desktop, javaScript: false });
  await page.goto(`${home}/settings`);
  await fillSignIn(page, people.steward.email, password);
  await page.waitForURL(`${home}/settings`);
  await page.getByRole("heading", { name: "Settings" }).waitFor();
});
