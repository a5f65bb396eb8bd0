import { mkdirSync } from "node:fs";
import { join } from "node:path";
import { AxeBuilder } from "@axe-core/playwright";
import { type Browser, chromium, type Page } from "playwright-core";
import { afterAll, afterEach, beforeAll, expect } from "vitest";
import { findProgram } from "../../local/packages.mjs";

const FLAGS = [
  "--no-sandbox",
  "--disable-dev-shm-usage",
  "--disable-gpu",
  "--disable-quic",
  "--no-first-run",
  "--disable-background-networking",
  "--disable-component-update",
  "--disable-sync",
];

export const desktop = { width: 1280, height: 860 };
/** A bench tablet held upright. */
export const tablet = { width: 820, height: 1180 };

export interface PageOptions {
  width: number;
  height: number;
  colorScheme?: "light" | "dark";
  javaScript?: boolean;
  touch?: boolean;
}

export interface TestBrowser {
  /** A page in a browser context of its own: no cookies shared with other pages. */
  newPage(options?: PageOptions): Promise<Page>;
  /** Lets problems that match pass in the present test, e.g. the console's note on a 503 that the test is about. */
  tolerate(problem: RegExp): void;
}

/**
 * One browser for all tests of a file. A test fails when one of its pages wrote an error to the console, threw, or
 * broke the content security policy (which Chromium reports on the console too). Call it at the top of the file.
 */
export function useBrowser(): TestBrowser {
  let browser: Browser | undefined;
  let problems: string[] = [];
  let tolerated: RegExp[] = [];

  beforeAll(async () => {
    browser = await chromium.launch({
      executablePath: findProgram("chromium") ?? "/usr/bin/chromium",
      args: FLAGS,
    });
  });
  afterEach(async () => {
    await Promise.all(browser?.contexts().map((context) => context.close()) ?? []);
    const found = problems.filter((problem) => !tolerated.some((pattern) => pattern.test(problem)));
    problems = [];
    tolerated = [];
    expect(found, "errors on the pages of this test").toEqual([]);
  });
  afterAll(async () => {
    await browser?.close();
  });

  return {
    async newPage({ colorScheme, javaScript = true, touch = false, ...viewport } = desktop) {
      if (browser === undefined)
        throw new Error("The browser starts in beforeAll: ask for a page inside a test.");
      const context = await browser.newContext({
        viewport,
        colorScheme,
        javaScriptEnabled: javaScript,
        hasTouch: touch,
        locale: "en-GB",
        timezoneId: "Europe/Berlin",
      });
      const page = await context.newPage();
      page.setDefaultTimeout(30_000);
      page.on("console", (message) => {
        if (message.type() === "error")
          problems.push(`${page.url()}: ${message.text()} ${message.location().url}`);
      });
      page.on("pageerror", (error) => problems.push(`${page.url()}: ${error.stack ?? error.message}`));
      return page;
    },
    tolerate(problem) {
      tolerated.push(problem);
    },
  };
}

/** Fails when axe finds a serious or critical violation on the page as it is now. */
export async function expectNoAxeViolations(page: Page): Promise<void> {
  // Our pages hold no frames of other origins, for which the slower way with a page of its own is made.
  const { violations } = await new AxeBuilder({ page }).setLegacyMode().analyze();
  const grave = violations
    .filter(({ impact }) => impact === "serious" || impact === "critical")
    .map(({ id, help, nodes }) => ({
      id,
      help,
      where: nodes.map((node) => `${node.target.join(" ")}: ${node.html}`),
    }));
  expect(grave, `axe on ${page.url()}`).toEqual([]);
}

/** Keeps a picture of the whole page as test-results/`name`.png. */
export async function screenshot(page: Page, name: string): Promise<void> {
  const file = join(process.cwd(), "test-results", `${name}.png`);
  mkdirSync(join(file, ".."), { recursive: true });
  await page.screenshot({ path: file, fullPage: true });
}
