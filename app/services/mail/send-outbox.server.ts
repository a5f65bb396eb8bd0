import { and, eq, isNull, lte, or, sql } from "drizzle-orm";
import { createTransport, type Transporter } from "nodemailer";
import { type Database, inTransaction, tables } from "~/db/client.server";
import { environment } from "~/environment.server";

const { outbox } = tables;

/** A batch of mails, each as slow as the timeouts allow, must be done within its lease. */
const BATCH = 5;
const LEASE_MS = 600_000;
const timeouts = { connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 60_000 };
const LONGEST_WAIT_MS = 3_600_000;

let transport: Transporter | undefined;

function mailTransport(): Transporter {
  transport ??= createTransport({ url: environment().SMTP_URL, ...timeouts });
  return transport;
}

/**
 * Sends the mails that are due; returns how many went out. A mail that fails waits twice as long each time (at most
 * an hour) and is never given up. A crash between sending and marking can send one again, with the same Message-ID.
 * Of a mail that went out only the fact is kept: its text may hold the link of an invitation or a reset.
 */
export async function sendOutbox(db: Database, now: () => Date): Promise<number> {
  const mails = await lease(db, now());
  let sent = 0;
  for (const mail of mails) {
    try {
      await mailTransport().sendMail({
        from: environment().MAIL_FROM,
        to: mail.recipient,
        subject: mail.subject,
        text: mail.text,
        html: mail.html,
        messageId: `<${mail.messageKey}@mainsgate>`,
      });
      await db
        .update(outbox)
        .set({ sentAt: now(), lockedUntil: null, lastError: null, text: "", html: "" })
        .where(eq(outbox.id, mail.id));
      sent++;
    } catch (error) {
      // Told once a mail; the row keeps the latest reason.
      if (mail.attempts === 0) console.error(`Mail ${mail.id} was not sent and will be tried again:`, error);
      const wait = Math.min(LONGEST_WAIT_MS, 5_000 * 2 ** mail.attempts);
      await db
        .update(outbox)
        .set({
          attempts: sql`${outbox.attempts} + 1`,
          dueAt: new Date(now().getTime() + wait),
          lockedUntil: null,
          lastError: String(error).slice(0, 500),
        })
        .where(eq(outbox.id, mail.id));
    }
  }
  return sent;
}

function lease(db: Database, now: Date) {
  return inTransaction(db, async (tx) => {
    const due = await tx
      .select()
      .from(outbox)
      .where(
        and(
          isNull(outbox.sentAt),
          lte(outbox.dueAt, now),
          or(isNull(outbox.lockedUntil), lte(outbox.lockedUntil, now)),
        ),
      )
      .orderBy(outbox.id)
      .limit(BATCH)
      .for("update", { skipLocked: true });
    for (const mail of due) {
      await tx
        .update(outbox)
        .set({ lockedUntil: new Date(now.getTime() + LEASE_MS) })
        .where(eq(outbox.id, mail.id));
    }
    return due;
  });
}
