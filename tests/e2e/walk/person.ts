import type { Page } from "playwright-core";
import { demoPeople } from "../../../local/seed/people";
import { expectNoAxeViolations, type PageOptions, type TestBrowser } from "../../helpers/browser";
import type { TestServer } from "../../helpers/server";

/** A person of the demo workshop at work, in a browser context of their own. */
export interface Person {
  name: string;
  email: string;
  password: string;
  page: Page;
  /** Address of the workshop. */
  home: string;
}

const WORKSHOP = "canal-street";

/** Signs somebody of the demo workshop in, on the way to the workshop's first page. */
export async function signIn(
  browser: TestBrowser,
  server: TestServer,
  firstName: string,
  size?: PageOptions,
): Promise<Person> {
  const found = demoPeople.find(({ name }) => name.startsWith(`${firstName} `));
  if (!found) throw new Error(`Nobody in the demo workshop is called ${firstName}.`);
  const page = await browser.newPage(size);
  const home = `${server.address}/w/${WORKSHOP}`;
  await page.goto(home);
  await arrive(page, "Sign in");
  await page.getByLabel("Mail address").fill(found.email);
  await page.getByLabel("Password").fill(found.password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.waitForURL(home);
  await arrive(page, "What waits for you");
  return { ...found, page, home };
}

/** Waits for the page with that first-level heading, and has axe look at it. */
export async function arrive(page: Page, heading: string | RegExp): Promise<void> {
  await page.getByRole("heading", { level: 1, name: heading }).waitFor();
  await expectNoAxeViolations(page);
}

/** Opens an address directly and waits until the page answers to clicks. */
export async function open(page: Page, address: string): Promise<void> {
  await page.goto(address);
  await hydrated(page);
}

/** React has taken the page over: before that, what is typed into a controlled field could be lost. */
export async function hydrated(page: Page): Promise<void> {
  await page.waitForFunction(() =>
    Object.keys(document.querySelector("main") ?? {}).some((key) => key.startsWith("__reactProps")),
  );
}

/** Goes to one of the workshop's places by its navigation. */
export async function goTo({ page }: Person, place: string): Promise<void> {
  await page.getByRole("navigation", { name: "Main" }).getByRole("link", { name: place }).click();
  await arrive(page, place);
}
