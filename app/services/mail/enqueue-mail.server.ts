import { randomUUID } from "node:crypto";
import { tables, type Transaction } from "~/db/client.server";
import { renderMail, type MailContent } from "./render-mail";

export interface MailInput extends MailContent {
  workshopId: number | null;
  recipient: string;
  at: Date;
}

/** Puts mails into the outbox within the transaction of the act that they tell of; the worker sends them. */
export async function enqueueMails(tx: Transaction, mails: readonly MailInput[]): Promise<void> {
  if (mails.length === 0) return;
  await tx.insert(tables.outbox).values(
    mails.map((mail) => ({
      workshopId: mail.workshopId,
      recipient: mail.recipient,
      subject: mail.subject,
      ...renderMail(mail),
      messageKey: randomUUID(),
      createdAt: mail.at,
      dueAt: mail.at,
    })),
  );
}
