import type { Problem } from "~/engine/problem";

/** What is missing or contradictory in a map, what blocks first; each leads to its row and field. */
export function ProblemList({
  problems,
  onJump,
}: {
  problems: readonly Problem[];
  onJump: (id: string, field: string | null) => void;
}) {
  const sorted = [...problems].sort((a, b) => Number(b.blocking) - Number(a.blocking));
  if (sorted.length === 0) return <p className="text-sm text-ink-soft">Every datum is filled in.</p>;
  return (
    <ul className="max-h-72 space-y-1 overflow-y-auto text-sm" tabIndex={0} aria-label="What is missing">
      {sorted.map((problem) => {
        const { subject } = problem;
        return (
          <li key={`${subject?.id ?? ""} ${problem.field ?? ""} ${problem.text}`} className="flex gap-2">
            <span className={`shrink-0 ${problem.blocking ? "font-semibold text-defect" : "text-ink-soft"}`}>
              {problem.blocking ? "Needed" : "Better"}
            </span>
            {subject ? (
              <button
                type="button"
                className="text-link min-w-0 text-left"
                onClick={() => onJump(subject.id, problem.field)}
              >
                {problem.text}
              </button>
            ) : (
              <span>{problem.text}</span>
            )}
          </li>
        );
      })}
    </ul>
  );
}
