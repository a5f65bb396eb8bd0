import { CalendarClock, CircleCheck, OctagonX } from "lucide-react";
import type { ReactNode } from "react";
import type { Validity } from "~/workflow/states";
import { validityWords } from "./validity-words";

const looks = {
  pass: { box: "border-pass bg-pass-wash", word: "text-pass", Icon: CircleCheck },
  undecided: { box: "border-undecided bg-undecided-wash", word: "text-undecided", Icon: CalendarClock },
  fail: { box: "border-fail bg-fail-wash", word: "text-fail", Icon: OctagonX },
};

/** Whether the unit may be plugged in today: sign, words and colour together. */
export function ValidityBanner({
  validity,
  departures,
  children,
}: {
  validity: Validity;
  /** It was signed although a check fails. */
  departures: boolean;
  children?: ReactNode;
}) {
  const { title, text, tone } = validityWords(validity, departures);
  const { box, word, Icon } = looks[tone];
  return (
    <div data-validity={validity.kind} className={`flex items-start gap-4 border-2 px-4 py-4 ${box}`}>
      <Icon aria-hidden size={40} className={`shrink-0 ${word}`} />
      <div className="min-w-0">
        <p className={`text-xl font-bold ${word}`}>{title}</p>
        <p>{text}</p>
        {children}
      </div>
    </div>
  );
}
