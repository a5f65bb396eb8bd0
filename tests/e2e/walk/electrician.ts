import { expect } from "vitest";
import type { Page } from "playwright-core";
import { expectNoAxeViolations } from "../../helpers/browser";
import { arrive, goTo, type Person } from "./person";

export interface Terms {
  conditions: { Place: string; Supply: string; Load: string; Supervision: string; Other: string };
  /** YYYY-MM-DD */
  recheckOn: string;
  signature: "drawn" | "typed";
}

/** Opens the unit's review from the queue, and sees that every guard is met. */
export async function review(electrician: Person, name: string): Promise<void> {
  const { page } = electrician;
  await goTo(electrician, "Signing");
  await page.getByRole("link", { name }).click();
  await arrive(page, name);
  const guards = page.getByRole("region", { name: "Before a signature" });
  await guards.getByText("Everything that can be told beforehand is met.").waitFor();
  expect(await guards.getByText("not met", { exact: true }).count()).toBe(0);
}

/** Fills the signing form in; the button is left to the caller. */
export async function fillSigning(
  person: Person,
  { conditions, recheckOn, signature }: Terms,
): Promise<void> {
  const form = person.page.getByRole("region", { name: "Decide" });
  for (const [label, words] of Object.entries(conditions)) {
    await form.getByRole("textbox", { name: new RegExp(`^${label}`) }).fill(words);
  }
  await form.getByLabel("Recheck by").fill(recheckOn);
  if (signature === "typed") {
    await form.getByRole("radio", { name: /^Type my name/ }).check();
    await form.getByRole("textbox", { name: "Your name" }).fill(person.name);
  } else {
    await drawSignature(person.page);
  }
  await form.getByLabel("Your password, again").locator("visible=true").fill(person.password);
}

/** Draws two strokes with the mouse. */
async function drawSignature(page: Page): Promise<void> {
  const canvas = page.getByRole("img", { name: "Field for the drawn signature" }).locator("visible=true");
  await canvas.scrollIntoViewIfNeeded();
  const box = await canvas.boundingBox();
  if (!box) throw new Error("The field for the signature is not on the page.");
  const at = (x: number, y: number) => [box.x + box.width * x, box.y + box.height * y] as const;
  for (const stroke of [
    [at(0.1, 0.6), at(0.2, 0.2), at(0.3, 0.7), at(0.45, 0.3)],
    [at(0.5, 0.65), at(0.6, 0.35), at(0.8, 0.55)],
  ]) {
    const [[startX, startY] = [0, 0], ...rest] = stroke;
    await page.mouse.move(startX, startY);
    await page.mouse.down();
    for (const [x, y] of rest) await page.mouse.move(x, y, { steps: 6 });
    await page.mouse.up();
  }
  await page.getByText("2 strokes").locator("visible=true").waitFor();
}

/** Signs by the button and waits for the record's page. */
export async function sign({ page }: Person, number: number): Promise<void> {
  await expectNoAxeViolations(page);
  await page.getByRole("button", { name: "Sign", exact: true }).click();
  await page.waitForURL(new RegExp(`/archive/${number}$`));
  await page.getByText(`Unit ${number} is signed.`).waitFor();
  await expectNoAxeViolations(page);
}

export async function withdraw({ page, password }: Person, number: number, reason: string): Promise<void> {
  await page.getByRole("link", { name: "Withdraw" }).click();
  await arrive(page, /^Withdraw the signature on/);
  await page.getByLabel("Why it is withdrawn").fill(reason);
  await page.getByLabel("Your password, again").fill(password);
  await page.getByRole("button", { name: "Withdraw the signature" }).click();
  await page.waitForURL(new RegExp(`/archive/${number}$`));
  await page.getByRole("region", { name: "Withdrawn" }).getByText(reason).waitFor();
  await expectNoAxeViolations(page);
}
