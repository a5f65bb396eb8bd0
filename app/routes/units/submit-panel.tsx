import { CircleCheck, CircleDashed, Send, Trash2, TriangleAlert } from "lucide-react";
import { Form, Link, useNavigation } from "react-router";
import { Button } from "~/components/ui/button";
import { ConfirmDialog } from "~/components/ui/confirm-dialog";
import { Sheet } from "~/components/ui/sheet";
import type { Problem } from "~/engine/problem";
import type { UnitState } from "~/workflow/states";

export interface SubmitPanelProps {
  base: string;
  unit: { number: number; state: UnitState; version: number; revision: number };
  submission: { problems: readonly Problem[]; unanswered: readonly number[] };
  /** Photos of the whole unit. */
  photos: number;
  mayDiscard: boolean;
  /** What the server said when it was tried. */
  refused: readonly string[] | null;
}

/** What stands between a draft and its examination, each with the way to it, and the button. */
export function SubmitPanel({ base, unit, submission, photos, mayDiscard, refused }: SubmitPanelProps) {
  const busy = useNavigation().formMethod === "POST";
  const { problems, unanswered } = submission;
  const ready = problems.length === 0 && unanswered.length === 0;
  return (
    <Sheet
      title={
        unit.state === "sent_back" ? `Submit again as revision ${unit.revision}` : "Submit for examination"
      }
      footer={
        <div className="flex flex-wrap items-center justify-between gap-3">
          <Form method="post">
            <input type="hidden" name="intent" value="submit" />
            <input type="hidden" name="version" value={unit.version} />
            <Button variant="primary" icon={Send} pending={busy} pendingLabel="Submitting…">
              {unit.state === "sent_back" ? "Submit again" : "Submit"}
            </Button>
          </Form>
          {mayDiscard ? (
            <ConfirmDialog
              trigger="Discard the draft"
              triggerVariant="quiet"
              triggerIcon={Trash2}
              title={`Discard unit ${unit.number}?`}
              confirm="Discard"
              fields={{ intent: "discard", version: String(unit.version) }}
            >
              <p>
                The draft with its map and photos disappears from every list. Its number is not given again.
              </p>
            </ConfirmDialog>
          ) : null}
        </div>
      }
    >
      {refused ? (
        <div role="alert" className="mb-4 border-l-4 border-fail bg-fail-wash px-4 py-3 text-sm">
          <p className="font-semibold text-fail">It was not submitted</p>
          <ul className="list-disc pl-5">
            {refused.map((reason) => (
              <li key={reason}>{reason}</li>
            ))}
          </ul>
        </div>
      ) : null}
      <ul className="space-y-2">
        <Step
          done={problems.length === 0}
          words={
            problems.length === 0
              ? "The energy map is complete."
              : `The energy map is incomplete: ${problems.length} ${problems.length === 1 ? "thing" : "things"} to fill in or put right.`
          }
        >
          {problems.slice(0, 8).map((problem) => (
            <li key={`${problem.subject?.id ?? ""} ${problem.field ?? ""} ${problem.text}`}>
              <Link to={problemHref(base, problem)} className="text-link">
                {problem.text}
              </Link>
            </li>
          ))}
          {problems.length > 8 ? (
            <li>
              <Link to={`${base}/map`} className="text-link">
                And {problems.length - 8} more in the map
              </Link>
            </li>
          ) : null}
        </Step>
        {unit.state === "sent_back" ? (
          <Step
            done={unanswered.length === 0}
            words={
              unanswered.length === 0
                ? "Every open finding is answered."
                : `Without an answer: finding ${unanswered.join(", ")}.`
            }
          >
            {unanswered.map((number) => (
              <li key={number}>
                <Link to={`${base}/rework#finding-${number}`} className="text-link">
                  Answer finding {number}
                </Link>
              </li>
            ))}
          </Step>
        ) : null}
        <Step
          done={photos > 0}
          optional
          words={
            photos > 0
              ? `${photos} ${photos === 1 ? "photo" : "photos"} added.`
              : "No photo yet. It can be submitted without, but the inspector will ask for what can’t be seen."
          }
        />
      </ul>
      {ready ? (
        <p className="mt-4 text-sm text-ink-soft">
          With the submission the map is frozen as revision {unit.revision} and the inspectors are told.
        </p>
      ) : null}
    </Sheet>
  );
}

function Step({
  done,
  optional = false,
  words,
  children,
}: {
  done: boolean;
  optional?: boolean;
  words: string;
  children?: React.ReactNode;
}) {
  const Icon = done ? CircleCheck : optional ? CircleDashed : TriangleAlert;
  return (
    <li className="flex gap-2">
      <Icon
        aria-hidden
        size={20}
        className={`mt-0.5 shrink-0 ${done ? "text-pass" : optional ? "text-ink-soft" : "text-defect"}`}
      />
      <div className="min-w-0">
        <p>
          <span className="sr-only">{done ? "Done: " : optional ? "Recommended: " : "Missing: "}</span>
          {words}
        </p>
        {children ? <ul className="mt-1 space-y-0.5 text-sm">{children}</ul> : null}
      </div>
    </li>
  );
}

/** The row and field that a problem is about; facts of the unit have their own page. */
function problemHref(base: string, problem: Problem): string {
  if (problem.subject === null) return problem.field ? `${base}/facts#unit-${problem.field}` : `${base}/map`;
  const field = problem.field === null ? "" : `-${problem.field}`;
  return `${base}/map#${problem.subject.kind}-${problem.subject.id}${field}`;
}
