import { useState } from "react";
import { PencilLine } from "lucide-react";
import { useKeptDraft } from "~/components/bench-kept-draft";
import { Button } from "~/components/ui/button";
import { Sheet } from "~/components/ui/sheet";
import type { UncertaintyPolicy } from "~/engine/verdict";
import type { BenchInstrument } from "~/services/bench/load-check.server";
import type { SheetLine } from "~/services/bench/sheet-view";
import { emptyAnswer, parseAnswerDraft } from "./answer-draft";
import { AnswerForm } from "./answer-form";
import { AnswerHistory } from "./answer-history";
import { VerdictBox } from "./verdict-box";

/** The bench's answer to the step: the form while there is none, else the answer with its history and a way to correct it. */
export function AnswerPanel({
  line,
  instruments,
  policy,
  againstMains,
  whyNot,
  draftKey,
  nextOpenKey,
}: {
  line: SheetLine;
  instruments: readonly BenchInstrument[];
  policy: UncertaintyPolicy;
  /** The step needs mains, and something says that mains must not be connected. */
  againstMains: boolean;
  /** Why the person may not work here; null when they may. */
  whyNot: string | null;
  draftKey: string;
  nextOpenKey: string | null;
}) {
  const { check, observation } = line;
  const draft = useKeptDraft(`${draftKey} answer`, emptyAnswer(check, instruments), parseAnswerDraft);
  const [correcting, setCorrecting] = useState(false);
  const open = whyNot === null && (observation === null || correcting || draft.restored);

  return (
    <Sheet title={observation ? "Answer" : check.asks.kind === "reading" ? "Reading" : "What you found"}>
      <div className="space-y-5">
        {observation ? (
          <>
            <VerdictBox
              verdict={line.verdict}
              because={line.because}
              judged={line.judged}
              unit={check.asks.kind === "reading" ? check.asks.limit.unit : ""}
            />
            <AnswerHistory history={line.history} />
            {whyNot === null && !open ? (
              <Button type="button" size="bench" icon={PencilLine} onClick={() => setCorrecting(true)}>
                Correct this answer
              </Button>
            ) : null}
          </>
        ) : null}
        {open ? (
          <AnswerForm
            line={line}
            instruments={instruments}
            policy={policy}
            againstMains={againstMains}
            draft={draft}
            nextOpenKey={nextOpenKey}
            onCancel={
              observation
                ? () => {
                    draft.forget();
                    setCorrecting(false);
                  }
                : null
            }
          />
        ) : null}
        {whyNot !== null ? <p className="text-ink-soft">To be read only: {whyNot}</p> : null}
      </div>
    </Sheet>
  );
}
