import { useEffect, useState } from "react";
import { z } from "zod";
import { useKeptDraft } from "~/components/bench-kept-draft";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { TextareaField } from "~/components/ui/textarea-field";
import type { FindingView } from "~/services/bench/sheet-view";
import { useStepFetcher } from "./step-fetcher";

const closeDraftSchema = z.object({ text: z.string() });

function parseCloseDraft(kept: unknown): { text: string } | null {
  const parsed = closeDraftSchema.safeParse(kept);
  return parsed.success ? parsed.data : null;
}

/**
 * A form that opens on request and closes a finding.
 *
 * @param base the address of the unit on the bench
 */
export function CloseFinding({
  finding,
  draftKey,
  base,
}: {
  finding: Pick<FindingView, "id" | "number">;
  draftKey: string;
  base: string;
}) {
  const { values, change, forget, restored } = useKeptDraft(
    `${draftKey} closing ${finding.id}`,
    { text: "" },
    parseCloseDraft,
  );
  const [wanted, setWanted] = useState(false);
  const { fetcher, saved, refusal, pending } = useStepFetcher();
  useEffect(() => {
    if (saved !== null) forget();
  }, [saved, forget]);
  if (!wanted && !restored) {
    return (
      <Button type="button" size="bench" variant="quiet" onClick={() => setWanted(true)}>
        Close finding {finding.number}…
      </Button>
    );
  }
  return (
    <fetcher.Form method="post" action={`${base}/check`} className="space-y-3" noValidate>
      <input type="hidden" name="act" value="close-finding" />
      <input type="hidden" name="finding" value={finding.id} />
      {refusal?.conflict ? <ConflictNotice message={refusal.conflict} /> : null}
      <FormErrorSummary form={{ errors: refusal?.errors[""] }} title="The finding was not closed" />
      <TextareaField
        field={{ name: "text", id: `closing-${finding.id}`, errors: refusal?.errors.text }}
        label={`What you saw that lets you close finding ${finding.number}`}
        size="bench"
        rows={2}
        maxLength={4000}
        value={values.text}
        onChange={(event) => change({ text: event.currentTarget.value })}
      />
      <div className="flex flex-wrap gap-2">
        <Button size="bench" pending={pending} pendingLabel="Closing…">
          Close it for good
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
          Leave it open
        </Button>
      </div>
    </fetcher.Form>
  );
}
