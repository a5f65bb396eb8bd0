import { database } from "~/services/database.server";
import { sendOutbox } from "~/services/mail/send-outbox.server";
import { runDueJobs } from "./run-jobs.server";

const PAUSE_MS = 1_000;

/** Starts the loop that makes record PDFs and sends mail. Any number of processes may run it: rows are leased. */
export function startWorker(): { stop(): Promise<void> } {
  let stopping = false;
  let wake: () => void = () => undefined;
  const now = () => new Date();

  async function loop() {
    let lastError = "";
    while (!stopping) {
      try {
        const done = (await runDueJobs(database(), now)) + (await sendOutbox(database(), now));
        lastError = "";
        if (done > 0) continue;
      } catch (error) {
        // The database being away is told once, not every second.
        if (String(error) !== lastError) console.error("The worker will try again:", error);
        lastError = String(error);
      }
      // Asked to stop during the work above, when there was no pause to wake from.
      if (stopping) return;
      await new Promise<void>((resolve) => {
        const timer = setTimeout(resolve, PAUSE_MS);
        wake = () => {
          clearTimeout(timer);
          resolve();
        };
      });
    }
  }

  const running = loop();
  return {
    async stop() {
      stopping = true;
      wake();
      await running;
    },
  };
}
