import { Sheet } from "~/components/ui/sheet";
import { Time } from "~/components/ui/time";

interface HistoryProps {
  revisions: readonly { number: number; createdAt: Date; submittedAt: Date | null }[];
  turns: readonly { inspector: string; revision: number; takenAt: Date; endedAt: Date | null }[];
}

/** The unit's revisions and who had each of them on the bench. */
export function ReviewHistory({ revisions, turns }: HistoryProps) {
  return (
    <Sheet id="history" title="Revisions and bench turns">
      <ol className="space-y-3">
        {revisions.map((revision) => (
          <li key={revision.number} className="border-l-2 border-rule-strong pl-3">
            <p className="font-medium">
              Revision {revision.number}, submitted <Time at={revision.submittedAt} />
            </p>
            {turns
              .filter((turn) => turn.revision === revision.number)
              .map((turn) => (
                <p key={`${turn.inspector} ${String(turn.takenAt)}`} className="text-sm text-ink-soft">
                  On the bench of {turn.inspector}: <Time at={turn.takenAt} /> to{" "}
                  <Time at={turn.endedAt} absent="now" />
                </p>
              ))}
          </li>
        ))}
      </ol>
    </Sheet>
  );
}
