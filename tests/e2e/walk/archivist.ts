import { arrive, goTo, type Person } from "./person";

/** Finds the unit's record by a search in the archive and opens it. */
export async function findInArchive(archivist: Person, name: string): Promise<void> {
  const { page } = archivist;
  await goTo(archivist, "Archive");
  await page.getByRole("searchbox", { name: "Search" }).fill(name);
  await page.getByRole("button", { name: "Show" }).click();
  await page.waitForURL(/[?&]q=/);
  await arrive(page, "Archive");
  await page.getByRole("link", { name }).click();
  await arrive(page, name);
}

/**
 * Opens the trail, has it verified and sees that it holds.
 * @returns who did what, in order: "Bruna Okafor submitted"
 */
export async function readTrail({ page }: Person, name: string): Promise<string[]> {
  await page.getByRole("link", { name: "Trail" }).click();
  await arrive(page, `Trail of ${name}`);
  await page.getByText("Not verified just now.").waitFor();
  await page.getByRole("link", { name: "Verify the whole trail" }).click();
  await page.getByText("The workshop’s trail is whole.").waitFor();
  const entries = page
    .getByRole("region", { name: "Everything that was done, in order" })
    .getByRole("listitem")
    .locator("p:first-child");
  return entries.filter({ has: page.locator(".font-semibold") }).allInnerTexts();
}
