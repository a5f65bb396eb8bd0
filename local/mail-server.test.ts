import { mkdtempSync, readdirSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { createTransport } from "nodemailer";
import { afterAll, beforeAll, expect, test } from "vitest";
import { startMailServer } from "./mail-server";
import { freePort } from "./processes";

const folder = mkdtempSync(join(tmpdir(), "mg-mail-"));
let server: Awaited<ReturnType<typeof startMailServer>>;
let smtpPort = 0;
let page = "";

beforeAll(async () => {
  smtpPort = await freePort();
  const webPort = await freePort();
  page = `http://127.0.0.1:${webPort}`;
  server = await startMailServer({ folder, smtpPort, webPort });
});
afterAll(async () => {
  await server.close();
  rmSync(folder, { recursive: true });
});

test("a message is kept whole and can be read as text and as HTML that may run nothing", async () => {
  expect(await (await fetch(page)).text()).toContain("No mail has been sent yet");
  const transport = createTransport(`smtp://127.0.0.1:${smtpPort}`);
  await transport.sendMail({
    from: "Mainsgate <mainsgate@demo.example>",
    to: "Bruna <bruna@demo.example>",
    subject: "Unit sent back: 2 < 3 & more",
    text: "Please look: http://localhost:3000/w/demo/units/1",
    html: `<p>Please look</p><script>parent.document.title = "run"</script>`,
    messageId: "<key-1@demo.example>",
  });

  expect(readdirSync(folder).filter((name) => !name.endsWith(".eml"))).toEqual([]);
  const [message] = await (await fetch(`${page}/messages.json`)).json();
  expect(message).toMatchObject({
    to: '"Bruna" <bruna@demo.example>',
    subject: "Unit sent back: 2 < 3 & more",
    messageId: "<key-1@demo.example>",
  });

  const response = await fetch(`${page}/messages/${message.id}`);
  const html = await response.text();
  expect(html).toContain("Unit sent back: 2 &#60; 3 &#38; more");
  expect(html).toContain('<a href="http://localhost:3000/w/demo/units/1" rel="noopener">');
  expect(/sandbox="([^"]*)"/.exec(html)?.[1]).toBe("allow-popups allow-popups-to-escape-sandbox");
  expect(html).not.toContain("<script");
  expect(response.headers.get("content-security-policy")).toContain("default-src 'none'");
});

test("nothing outside the folder of messages can be read", async () => {
  for (const path of ["/messages/..%2f..%2fpackage.json", "/messages/%2e%2e/x", "/other"]) {
    expect((await fetch(page + path)).status, path).toBe(404);
  }
});
