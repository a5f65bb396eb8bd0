import { expectNoAxeViolations } from "../../helpers/browser";
import { arrive, goTo, open, type Person } from "./person";
import { addPhoto } from "./photo";

export interface NewUnit {
  name: string;
  purpose: string;
  protectionClass: "I" | "II";
}

/** Makes a unit by the form, and gives its number. */
export async function makeUnit(builder: Person, unit: NewUnit): Promise<number> {
  const { page, home } = builder;
  await goTo(builder, "Units");
  await page.getByRole("link", { name: "New unit" }).first().click();
  await arrive(page, "New unit");
  await page.getByLabel("Name", { exact: true }).fill(unit.name);
  await page.getByLabel("What it is for").fill(unit.purpose);
  await page.getByLabel("Where it will be used").fill("Reading room, dry");
  await page.getByLabel("Supply voltage").fill("230");
  await page.getByLabel("Supply frequency").fill("50");
  await page
    .getByRole("radio", { name: `Class ${unit.protectionClass} `, exact: false })
    .first()
    .check();
  await page.getByLabel("Length of the supply cord").fill("1,8");
  await page.getByLabel("Cross-section of the cord").fill("0.75");
  await page.getByLabel("Height above sea level").fill("120");
  await page.getByRole("radio", { name: "No", exact: true }).check();
  await page.getByRole("button", { name: "Make the unit" }).click();
  await page.waitForURL(/\/units\/\d+\/map$/);
  await page.getByText("Now describe its energy map.").waitFor();
  return Number(/units\/(\d+)\/map$/.exec(page.url().slice(home.length))?.[1]);
}

/** Begins the map from a starter, takes its figures for those of the parts, and waits until it is on the server. */
export async function startMap({ page }: Person, starter: string): Promise<void> {
  await page.getByRole("button", { name: new RegExp(`^${starter}`) }).click();
  await page
    .getByRole("button", { name: /still has the starter's example figures/ })
    .first()
    .waitFor();
  await expectNoAxeViolations(page);
  await page.getByRole("button", { name: "All figures are my parts’…" }).click();
  await page.getByRole("button", { name: "I have looked: they are" }).click();
  await page
    .getByRole("status")
    .filter({ hasText: /^Saved / })
    .waitFor();
  await page.getByText("Nothing stands against submitting").waitFor();
  await expectNoAxeViolations(page);
}

export interface MapEdit {
  /** Id of the element, such as F2. */
  element: string;
  field: string;
  value: string;
}

/** Changes one datum of an element in the map's editor, and goes on once it is saved. */
export async function editMap({ page }: Person, { element, field, value }: MapEdit): Promise<void> {
  const row = page.locator(`#element-${element}`);
  await row.getByRole("button", { name: new RegExp(`^${element} `) }).click();
  await row.getByRole("textbox", { name: field, exact: true }).fill(value);
  await page
    .getByRole("status")
    .filter({ hasText: /^Saved / })
    .waitFor();
  await expectNoAxeViolations(page);
  await page.getByRole("button", { name: "Review and submit" }).click();
}

/** Adds a photo of the unit and submits it. */
export async function submitWithPhoto({ page }: Person, number: number): Promise<void> {
  await page.waitForURL(new RegExp(`/units/${number}$`));
  await addPhoto(page, "Add photos or drawings", "inside.jpg");
  await page.getByText("1 photo added.").waitFor();
  await expectNoAxeViolations(page);
  await page.getByRole("button", { name: "Submit", exact: true }).click();
  await page.getByText(`Unit ${number} is submitted.`).waitFor();
  await expectNoAxeViolations(page);
}

/** Answers the one open finding in words and with a photo, and goes on to the map. */
export async function answerFinding({ page, home }: Person, number: number, words: string): Promise<void> {
  await open(page, `${home}/units/${number}/rework`);
  await expectNoAxeViolations(page);
  await page.getByLabel("Your answer to finding 1").fill(words);
  await page
    .getByRole("status")
    .filter({ hasText: /^Saved / })
    .waitFor();
  await addPhoto(page, "Add photos to the answer", "mended.jpg");
  await page.getByRole("link", { name: "Edit the map" }).click();
  await page.waitForURL(/\/map$/);
}

/** Submits again after rework, and gives what the page said had changed. */
export async function resubmit({ page }: Person, number: number): Promise<string> {
  await page.waitForURL(/\/rework$/);
  await page.getByText("Every open finding is answered.").waitFor();
  const changes = await page.getByRole("region", { name: "Changes to the map" }).innerText();
  await expectNoAxeViolations(page);
  await page.getByRole("button", { name: "Submit again" }).click();
  await page.getByText(`Revision 2 of unit ${number} is submitted.`).waitFor();
  return changes;
}
