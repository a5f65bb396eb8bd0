import { readFileSync } from "node:fs";
import { createServer, request as httpRequest } from "node:http";
import { expect, onTestFinished, test } from "vitest";
import { freePort } from "../../local/processes";
import { desktop, expectNoAxeViolations, tablet, useBrowser } from "../helpers/browser";
import { startServer, useServer } from "../helpers/server";

const server = useServer({ data: "empty" });
const browser = useBrowser();

/** Sends a form by hand, as a browser would, with only the headers given. */
function post(address: string, path: string, headers: Record<string, string>) {
  return fetch(`${address}${path}`, {
    method: "POST",
    headers: { "content-type": "application/x-www-form-urlencoded", ...headers },
    body: new URLSearchParams({ email: "nobody@demo.example", password: "not the password" }),
    redirect: "manual",
  });
}

test.each([
  ["desktop", desktop],
  ["tablet", tablet],
])(
  "the first page loads at %s size without an error, a policy violation or a serious axe finding",
  async (_, size) => {
    const page = await browser.newPage(size);
    await page.goto(server().address);
    await page.getByRole("heading", { level: 1 }).waitFor();
    await expectNoAxeViolations(page);
  },
);

test("pages carry a policy that lets no foreign or inline script run, with a new nonce each time", async () => {
  const policies = await Promise.all(
    [1, 2].map(
      async () => (await fetch(`${server().address}/sign-in`)).headers.get("content-security-policy") ?? "",
    ),
  );
  for (const policy of policies) {
    expect(policy).toMatch(/script-src 'self' 'nonce-[\w+/=]{24}';/);
    expect(policy).toContain("frame-ancestors 'none'");
  }
  expect(policies[0]).not.toBe(policies[1]);
});

test("a script that got into a page does not run", async () => {
  const page = await browser.newPage();
  browser.tolerate(/Content Security Policy/);
  await page.goto(`${server().address}/sign-in`);
  await page.evaluate(() => {
    const script = document.createElement("script");
    script.textContent = "document.title = 'taken over'";
    document.body.append(script);
  });
  expect(await page.title()).not.toBe("taken over");
});

test("built files may be kept for good, pages may not, and a missing file is no page", async () => {
  const html = await (await fetch(`${server().address}/sign-in`)).text();
  const asset = /\/assets\/[\w.-]+\.js/.exec(html)?.[0] ?? "";
  const cacheOf = async (path: string) => {
    const response = await fetch(`${server().address}${path}`);
    return [response.status, response.headers.get("cache-control")];
  };
  expect(await cacheOf(asset)).toEqual([200, "public, max-age=31536000, immutable"]);
  expect(await cacheOf("/sign-in")).toEqual([200, "private, no-cache"]);
  expect((await cacheOf("/assets/gone-12345678.js"))[0]).toBe(404);
});

test("the server's bundle holds react-router's production build, and loads no other", () => {
  const bundle = readFileSync(".data/build-for-tests/server/index.js", "utf8");
  expect(bundle).toContain("node_modules/react-router/dist/production/");
  expect(bundle).not.toMatch(
    /node_modules\/react-router\/dist\/development\/|(from|import) "(react-router|@react-router)/,
  );
});

test("a form from another site is refused, on pages and on resource routes", async () => {
  for (const path of ["/sign-in", "/sign-out", "/theme", "/api/w/demo/maps/evaluate"]) {
    const foreign: Record<string, string>[] = [
      { "sec-fetch-site": "cross-site", origin: "https://evil.example" },
      { "sec-fetch-site": "same-site", origin: server().address },
      { origin: "https://evil.example" },
      { origin: "null" },
      {},
    ];
    for (const headers of foreign) {
      const response = await post(server().address, path, headers);
      expect(response.status, `${path} ${JSON.stringify(headers)}`).toBe(403);
      expect(await response.text()).toContain("nothing was changed");
    }
  }
});

/** The sign-in form's own answer to a wrong password: the request reached its action. */
const WRONG_PASSWORD = 401;

test("a form from our own page is let through", async () => {
  const own: Record<string, string>[] = [
    { "sec-fetch-site": "same-origin", origin: server().address },
    { origin: server().address },
  ];
  for (const headers of own) {
    const response = await post(server().address, "/sign-in", headers);
    expect(response.status, JSON.stringify(headers)).toBe(WRONG_PASSWORD);
  }
});

test("behind a proxy that ends TLS, our own form passes and a foreign one does not", async () => {
  const publicAddress = "https://mainsgate.workshop.example";
  const behind = await startServer({
    data: "empty",
    variables: { APP_URL: publicAddress, TRUST_PROXY: "1" },
  });
  onTestFinished(() => behind.stop());
  const inner = new URL(behind.address);
  const proxy = createServer((incoming, outgoing) => {
    const headers = {
      ...incoming.headers,
      host: inner.host,
      "x-forwarded-proto": "https",
      "x-forwarded-for": "192.0.2.7",
    };
    const forwarded = httpRequest(
      { host: "127.0.0.1", port: inner.port, method: incoming.method, path: incoming.url, headers },
      (answer) => {
        outgoing.writeHead(answer.statusCode ?? 502, answer.headers);
        answer.pipe(outgoing);
      },
    );
    incoming.pipe(forwarded);
  });
  const port = await freePort();
  await new Promise<void>((resolve) => proxy.listen(port, "127.0.0.1", resolve));
  onTestFinished(() => void proxy.close());

  const own = await post(`http://127.0.0.1:${port}`, "/sign-in", { origin: publicAddress });
  expect(own.status).toBe(WRONG_PASSWORD);
  expect(own.headers.get("strict-transport-security")).toContain("max-age=");
  expect(
    (await post(`http://127.0.0.1:${port}`, "/sign-in", { origin: "https://evil.example" })).status,
  ).toBe(403);
});

test("more changes a minute than allowed are told to wait", async () => {
  const strict = await startServer({ data: "empty", variables: { CHANGES_PER_MINUTE: "3" } });
  onTestFinished(() => strict.stop());
  const answers = [];
  for (let i = 0; i < 4; i++) answers.push(await post(strict.address, "/theme", { origin: strict.address }));
  expect(answers.slice(0, 3).map(({ status }) => status)).not.toContain(429);
  expect(answers[3]?.status).toBe(429);
  expect(Number(answers[3]?.headers.get("retry-after"))).toBeGreaterThan(0);
});

test("while MariaDB is away people are told so, and afterwards everything works again without a restart", async () => {
  const { address, services } = server();
  const health = async () => (await fetch(`${address}/healthz`)).status;
  expect(await health()).toBe(200);

  await services.mariadb.stop();
  try {
    expect(await health()).toBe(503);
    const page = await browser.newPage();
    browser.tolerate(/503/);
    const answer = await page.goto(`${address}/sign-in`);
    expect(answer?.status()).toBe(503);
    expect(answer?.headers()["retry-after"]).toBe("5");
    await page.getByText("The database does not answer just now").waitFor();
    const api = await fetch(`${address}/api/w/demo/units`);
    expect(api.headers.get("content-type")).toContain("application/problem+json");
    expect(await api.json()).toMatchObject({ status: 503 });
  } finally {
    await services.mariadb.startAgain();
  }
  expect(await health()).toBe(200);
  expect((await fetch(`${address}/sign-in`)).status).toBe(200);
});

test("a form sent while MariaDB restarts waits for it and is answered", async () => {
  const { address, services } = server();
  await services.mariadb.stop();
  // The health check notes that it is away, so that the form can't slip through on an answer of a moment ago.
  expect((await fetch(`${address}/healthz`)).status).toBe(503);
  const sent = post(address, "/sign-in", { origin: address });
  await services.mariadb.startAgain();
  expect((await sent).status).toBe(WRONG_PASSWORD);
});
