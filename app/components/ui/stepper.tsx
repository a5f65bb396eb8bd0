/**
 * The stations of a longer job, in order; the ones with an address are links.
 *   <Stepper label="Submitting a unit" steps={[{ label: "Facts", status: "done", to: "facts" }, { label: "Map", status: "current" }]} />
 */
import { Check } from "lucide-react";
import { Link } from "react-router";

export interface Step {
  label: string;
  status: "done" | "current" | "todo";
  to?: string;
}

const statusWords = { done: "done", current: "current step", todo: "to do" } as const;

export function Stepper({ label, steps }: { label: string; steps: Step[] }) {
  return (
    <nav aria-label={label} className="mb-5 print:hidden">
      <ol className="flex flex-wrap gap-x-1 gap-y-2">
        {steps.map((step, index) => {
          const content = (
            <>
              <span
                aria-hidden
                className={
                  "inline-flex size-7 shrink-0 items-center justify-center rounded-full border text-sm font-semibold tabular-nums " +
                  (step.status === "current"
                    ? "border-copper bg-copper text-on-copper"
                    : step.status === "done"
                      ? "border-copper text-copper"
                      : "border-rule-strong text-ink-soft")
                }
              >
                {step.status === "done" ? <Check size={16} /> : index + 1}
              </span>
              <span
                className={
                  step.status === "current" ? "font-semibold" : step.status === "todo" ? "text-ink-soft" : ""
                }
              >
                {step.label}
                <span className="sr-only">, {statusWords[step.status]}</span>
              </span>
            </>
          );
          const box = "inline-flex min-h-11 items-center gap-2 pr-2 text-sm";
          return (
            <li
              key={step.label}
              aria-current={step.status === "current" ? "step" : undefined}
              className="flex items-center gap-1 not-last:after:h-px not-last:after:w-6 not-last:after:bg-rule-strong"
            >
              {step.to ? (
                <Link to={step.to} className={`${box} underline-offset-4 hover:underline`}>
                  {content}
                </Link>
              ) : (
                <span className={box}>{content}</span>
              )}
            </li>
          );
        })}
      </ol>
    </nav>
  );
}
