import { Flag } from "lucide-react";
import { useEffect, useState } from "react";
import { z } from "zod";
import { useKeptDraft } from "~/components/bench-kept-draft";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { ChoiceGroupField } from "~/components/ui/choice-group-field";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { SelectField } from "~/components/ui/select-field";
import { TextareaField } from "~/components/ui/textarea-field";
import type { BenchCheck } from "~/engine/bench-check";
import { severityChoices } from "./severities";
import { useStepFetcher } from "./step-fetcher";

const raiseDraftSchema = z.object({
  severity: z.enum(["", "danger", "defect", "advice"]),
  element: z.string(),
  text: z.string(),
});
type RaiseDraft = z.infer<typeof raiseDraftSchema>;

function parseRaiseDraft(kept: unknown): RaiseDraft | null {
  const parsed = raiseDraftSchema.safeParse(kept);
  return parsed.success ? parsed.data : null;
}

/**
 * A form that opens on request and raises a finding: on a check, or, without one, on an element of the unit.
 *
 * @param base the address of the unit on the bench
 */
export function RaiseFinding({
  check,
  elements,
  draftKey,
  base,
}: {
  check: Pick<BenchCheck, "key" | "subjects"> | null;
  elements: readonly { id: string; label: string }[];
  draftKey: string;
  base: string;
}) {
  const { values, change, forget, restored } = useKeptDraft<RaiseDraft>(
    `${draftKey} finding`,
    { severity: "", element: "", text: "" },
    parseRaiseDraft,
  );
  const [wanted, setWanted] = useState(false);
  const { fetcher, saved, refusal, pending } = useStepFetcher();
  useEffect(() => {
    if (saved === null) return;
    forget();
    setWanted(false);
  }, [saved, forget]);

  if (!wanted && !restored) {
    return (
      <Button type="button" size="bench" icon={Flag} onClick={() => setWanted(true)}>
        Raise a finding
      </Button>
    );
  }
  const errors = refusal?.errors ?? {};
  const subjects = check?.subjects.elements ?? [];
  const own = elements.filter(({ id }) => subjects.includes(id));
  const others = elements.filter(({ id }) => !subjects.includes(id));
  return (
    <fetcher.Form method="post" action={`${base}/check`} className="space-y-4" noValidate>
      <input type="hidden" name="act" value="raise-finding" />
      <input type="hidden" name="key" value={check?.key ?? ""} />
      {refusal?.conflict ? <ConflictNotice message={refusal.conflict} /> : null}
      <FormErrorSummary form={{ errors: errors[""] }} title="The finding was not raised" />
      {restored ? <p role="status">What you had typed here before is back. It is not saved yet.</p> : null}
      <ChoiceGroupField
        field={{ name: "severity", errors: errors.severity }}
        label="How bad is it?"
        size="bench"
        columns={3}
        options={severityChoices}
        value={values.severity}
        onChange={(event) =>
          change({
            severity: parseRaiseDraft({ ...values, severity: event.currentTarget.value })?.severity ?? "",
          })
        }
      />
      <TextareaField
        field={{ name: "text", id: "finding-text", errors: errors.text }}
        label="What is wrong"
        size="bench"
        rows={3}
        maxLength={4000}
        value={values.text}
        onChange={(event) => change({ text: event.currentTarget.value })}
      />
      <SelectField
        field={{ name: "element", errors: errors.element ?? errors.elementId }}
        label="On which element"
        optional={check !== null}
        size="bench"
        placeholder={check ? "On the check as a whole" : "Choose"}
        options={[...own, ...others].map(({ id, label }) => ({ value: id, label: `${id}, ${label}` }))}
        value={values.element}
        onChange={(event) => change({ element: event.currentTarget.value })}
      />
      <p className="text-sm text-ink-soft">Photos can be added as soon as it is raised.</p>
      <div className="flex flex-wrap gap-2">
        <Button size="bench" variant="primary" icon={Flag} pending={pending} pendingLabel="Raising…">
          Raise it
        </Button>
        <Button
          type="button"
          size="bench"
          variant="quiet"
          onClick={() => {
            forget();
            setWanted(false);
          }}
        >
          Throw it away
        </Button>
      </div>
    </fetcher.Form>
  );
}
