/**
 * What just happened, said once at the top of the next page. It stays until it is dismissed or the page changes.
 *   <Flash message={loaderData.flash} />        message: { tone: "done", text: "Submitted to the bench." }
 */
import { CircleCheck, Info, OctagonAlert, X } from "lucide-react";
import { useState } from "react";
import type { IconType } from "./icon-type";

export type FlashTone = "done" | "note" | "problem";

export interface FlashMessage {
  tone: FlashTone;
  text: string;
}

const tones: Record<FlashTone, { box: string; icon: IconType; word: string }> = {
  done: { box: "border-copper bg-copper-wash text-ink", icon: CircleCheck, word: "Done" },
  note: { box: "border-advice bg-advice-wash text-ink", icon: Info, word: "Note" },
  problem: { box: "border-fail bg-fail-wash text-ink", icon: OctagonAlert, word: "Problem" },
};

export function Flash({ message }: { message: FlashMessage | null | undefined }) {
  const [dismissed, setDismissed] = useState<FlashMessage | null>(null);
  const shown = message && message !== dismissed ? message : null;
  // The live region is always there: one that arrives together with its text is often not read out.
  return (
    <div role={message?.tone === "problem" ? "alert" : "status"} className="print:hidden">
      {shown ? <FlashBox message={shown} onDismiss={() => setDismissed(shown)} /> : null}
    </div>
  );
}

function FlashBox({ message, onDismiss }: { message: FlashMessage; onDismiss: () => void }) {
  const { box, icon: Icon, word } = tones[message.tone];
  return (
    <div className={`mb-4 flex items-start gap-3 border-l-4 py-1 pr-1 pl-4 ${box}`}>
      <Icon aria-hidden size={20} className="mt-3 shrink-0" />
      <p className="min-w-0 grow py-2.5">
        <span className="sr-only">{word}: </span>
        {message.text}
      </p>
      <button
        type="button"
        aria-label="Dismiss this message"
        onClick={onDismiss}
        className="inline-flex size-11 shrink-0 items-center justify-center rounded-sm hover:bg-sheet"
      >
        <X aria-hidden size={18} />
      </button>
    </div>
  );
}
