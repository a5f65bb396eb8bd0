import type { Locator, Page } from "playwright-core";
import { drawPicture } from "../../../local/seed/pictures";

let drawn: Promise<Buffer> | undefined;

/** Adds a drawn picture by the file chooser with that label, and waits until it is shown. */
export async function addPhoto(page: Page | Locator, label: string, name: string): Promise<void> {
  const pictures = page.getByRole("img", { name });
  const before = await pictures.count();
  drawn ??= drawPicture("Test picture", 3);
  await page
    .getByLabel(label, { exact: true })
    .setInputFiles({ name, mimeType: "image/jpeg", buffer: await drawn });
  await pictures.nth(before).waitFor();
}
