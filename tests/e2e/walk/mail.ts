import { expect } from "vitest";
import type { TestServer } from "../../helpers/server";

/** Waits until a mail with that subject has reached each of the addresses, and nobody else. */
export async function expectMail(server: TestServer, subject: string, to: readonly string[]): Promise<void> {
  const recipients = async () =>
    (await server.messages())
      .filter((message) => message.subject === subject)
      .map((message) => message.to)
      .sort();
  await expect.poll(recipients, { timeout: 30_000, message: subject }).toEqual([...to].sort());
}
