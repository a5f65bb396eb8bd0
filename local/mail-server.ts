import { mkdirSync } from "node:fs";
import { readFile, readdir, rename, writeFile } from "node:fs/promises";
import { createServer } from "node:http";
import { join } from "node:path";
import { simpleParser } from "mailparser";
import { SMTPServer } from "smtp-server";
import { listPage, messagePage, type ReadMessage } from "./mail-pages";

export interface MailServerOptions {
  /** Each message is kept here as an .eml file. */
  folder: string;
  smtpPort: number;
  webPort: number;
}

/** A local SMTP server that keeps every message and delivers none, with a page to read them. */
export async function startMailServer(options: MailServerOptions): Promise<{ close(): Promise<void> }> {
  mkdirSync(options.folder, { recursive: true, mode: 0o700 });
  let count = 0;
  const smtp = new SMTPServer({
    authOptional: true,
    disabledCommands: ["STARTTLS"],
    size: 20 * 1024 * 1024,
    logger: false,
    onAuth: (_auth, _session, callback) => callback(null, { user: "local" }),
    onData(stream, _session, callback) {
      const chunks: Buffer[] = [];
      stream.on("data", (chunk: Buffer) => chunks.push(chunk));
      stream.on("end", () => {
        const name = `${new Date().toISOString().replace(/[-:.]/g, "")}-${process.pid}-${String(++count).padStart(4, "0")}`;
        keep(options.folder, name, Buffer.concat(chunks)).then(
          () => callback(null),
          (error: Error) => callback(error),
        );
      });
    },
  });
  await new Promise<void>((resolve, reject) => {
    smtp.once("error", reject);
    smtp.listen(options.smtpPort, "127.0.0.1", resolve);
  });
  smtp.on("error", (error) => console.error(error));

  const web = createServer((request, response) => {
    const send = (status: number, type: string, body: string | Buffer) =>
      response
        .writeHead(status, {
          "content-type": type,
          "x-content-type-options": "nosniff",
          "cache-control": "no-store",
          "content-security-policy":
            "default-src 'none'; style-src 'unsafe-inline'; img-src data:; frame-src 'self'; form-action 'none'; base-uri 'none'",
        })
        .end(body);
    void answerPage(options.folder, request.url ?? "/").then(
      ({ status, type, body }) => send(status, type, body),
      (error: unknown) => send(500, "text/plain; charset=utf-8", String(error)),
    );
  });
  await new Promise<void>((resolve, reject) => {
    web.once("error", reject);
    web.listen(options.webPort, "127.0.0.1", resolve);
  });
  return {
    async close() {
      await new Promise<void>((resolve) => smtp.close(() => resolve()));
      await new Promise<void>((resolve) => {
        web.close(() => resolve());
        web.closeAllConnections();
      });
    },
  };
}

/** A message is whole or not there: it is written beside and then renamed. */
async function keep(folder: string, name: string, message: Buffer): Promise<void> {
  const temporary = join(folder, `${name}.part`);
  await writeFile(temporary, message, { mode: 0o600 });
  await rename(temporary, join(folder, `${name}.eml`));
}

async function answerPage(
  folder: string,
  url: string,
): Promise<{ status: number; type: string; body: string | Buffer }> {
  const path = new URL(url, "http://local").pathname;
  const html = "text/html; charset=utf-8";
  if (path === "/") return { status: 200, type: html, body: listPage(await readMessages(folder)) };
  if (path === "/messages.json") {
    return { status: 200, type: "application/json", body: JSON.stringify(await readMessages(folder)) };
  }
  const [, id, raw] = /^\/messages\/([0-9A-Z-]+?)(\.eml)?$/.exec(path) ?? [];
  if (id !== undefined) {
    const file = join(folder, `${id}.eml`);
    if (raw) return { status: 200, type: "text/plain; charset=utf-8", body: await readFile(file) };
    return { status: 200, type: html, body: messagePage(await readMessage(folder, id)) };
  }
  return { status: 404, type: "text/plain; charset=utf-8", body: "There is no such page." };
}

/** All kept messages, newest first. */
export async function readMessages(folder: string): Promise<ReadMessage[]> {
  const names = (await readdir(folder)).filter((name) => name.endsWith(".eml"));
  const ids = names.map((name) => name.slice(0, -".eml".length)).sort();
  return Promise.all(ids.reverse().map((id) => readMessage(folder, id)));
}

async function readMessage(folder: string, id: string): Promise<ReadMessage> {
  const mail = await simpleParser(await readFile(join(folder, `${id}.eml`)));
  const recipients = Array.isArray(mail.to) ? mail.to.map((entry) => entry.text).join(", ") : mail.to?.text;
  return {
    id,
    date: (mail.date ?? new Date(0)).toISOString(),
    from: mail.from?.text ?? "",
    to: recipients ?? "",
    subject: mail.subject ?? "(no subject)",
    messageId: mail.messageId ?? "",
    text: mail.text ?? "",
    html: typeof mail.html === "string" ? mail.html : "",
  };
}
