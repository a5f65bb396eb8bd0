import { Save, SkipForward } from "lucide-react";
import { useEffect } from "react";
import { useHref, useLocation, useNavigate, useParams } from "react-router";
import type { useKeptDraft } from "~/components/bench-kept-draft";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { ChoiceGroupField } from "~/components/ui/choice-group-field";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { TextareaField } from "~/components/ui/textarea-field";
import type { UncertaintyPolicy } from "~/engine/verdict";
import type { BenchInstrument } from "~/services/bench/load-check.server";
import type { SheetLine } from "~/services/bench/sheet-view";
import type { AnswerDraft } from "./answer-draft";
import { checkHref } from "./check-href";
import { judgeDraft } from "./live-verdict";
import { ConditionsField, ReadingFields } from "./reading-fields";
import { useStepFetcher } from "./step-fetcher";
import { VerdictBox } from "./verdict-box";

/** The step's form: a reading or what was seen, or why there is none; the verdict of what is typed shows at once. */
export function AnswerForm({
  line,
  instruments,
  policy,
  againstMains,
  draft,
  nextOpenKey,
  onCancel,
}: {
  line: SheetLine;
  instruments: readonly BenchInstrument[];
  policy: UncertaintyPolicy;
  /** The step needs mains, and something says that mains must not be connected: an answer needs a reason. */
  againstMains: boolean;
  draft: ReturnType<typeof useKeptDraft<AnswerDraft>>;
  nextOpenKey: string | null;
  /** Given for a correction, which can be left alone. */
  onCancel: (() => void) | null;
}) {
  const { check, observation } = line;
  const { values, change, forget, restored } = draft;
  const { fetcher, saved, refusal, pending } = useStepFetcher();
  const navigate = useNavigate();
  const { workshop, unit } = useParams();
  const location = useLocation();
  const here = useHref(location.pathname + location.search);
  const goOn = fetcher.formData?.get("then") === "go-on";

  useEffect(() => {
    if (saved === null) return;
    forget();
    if (goOn && nextOpenKey !== null) {
      void navigate(checkHref(`/w/${workshop}/bench/${unit}`, nextOpenKey));
    }
    // Once for each answer of the server; the form is made anew when the page has read it.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [saved]);

  const live = judgeDraft(check, values, instruments, policy);
  const errors = refusal?.errors ?? {};
  const needsReason = values.kind !== "answer" || observation !== null || againstMains;
  const kind =
    values.kind !== "answer" ? values.kind : check.asks.kind === "reading" ? "measured" : "examined";

  return (
    <fetcher.Form method="post" className="space-y-5" noValidate>
      <input type="hidden" name="act" value="observe" />
      <input type="hidden" name="key" value={check.key} />
      <input type="hidden" name="latestId" value={observation?.id ?? ""} />
      <input type="hidden" name="kind" value={kind} />
      {refusal?.conflict ? <ConflictNotice message={refusal.conflict} reloadHref={here} /> : null}
      <FormErrorSummary form={{ errors: errors[""] }} title="This was not saved" />
      {restored ? (
        <p
          role="status"
          className="flex flex-wrap items-center justify-between gap-2 bg-advice-wash px-3 py-2"
        >
          What you had typed here before is back. It is not saved yet.
          <Button type="button" variant="quiet" onClick={onCancel ?? forget}>
            Throw it away
          </Button>
        </p>
      ) : null}
      {observation ? (
        <p className="font-medium">A correction is a new answer; the one above stays visible.</p>
      ) : null}

      {values.kind !== "answer" ? null : check.asks.kind === "reading" ? (
        <ReadingFields
          asks={check.asks}
          values={values}
          change={change}
          instruments={instruments}
          errors={errors}
        />
      ) : (
        <ChoiceGroupField
          field={{ name: "conforms", errors: errors.conforms }}
          label={check.asks.question}
          size="bench"
          columns={2}
          options={[
            { value: "yes", label: check.asks.conforms },
            { value: "no", label: check.asks.doesNot },
          ]}
          value={values.conforms}
          onChange={(event) => change({ conforms: event.currentTarget.value === "yes" ? "yes" : "no" })}
        />
      )}
      {needsReason ? (
        <TextareaField
          field={{ name: "reason", errors: errors.reason }}
          label={reasonLabel(values.kind, againstMains)}
          size="bench"
          rows={2}
          maxLength={1000}
          value={values.reason}
          onChange={(event) => change({ reason: event.currentTarget.value })}
        />
      ) : null}
      <div aria-live="polite" className="min-h-24 border-y border-rule py-4">
        {live.kind === "verdict" ? (
          <VerdictBox {...live} unit={check.asks.kind === "reading" ? check.asks.limit.unit : ""} />
        ) : (
          <p className="text-ink-soft">{live.hint}</p>
        )}
      </div>

      {kind === "measured" && check.asks.kind === "reading" ? (
        <ConditionsField asks={check.asks} values={values} change={change} errors={errors} />
      ) : null}
      <TextareaField
        field={{ name: "note", errors: errors.note }}
        label="Note"
        optional
        size="bench"
        rows={1}
        maxLength={4000}
        value={values.note}
        onChange={(event) => change({ note: event.currentTarget.value })}
      />

      <div className="flex flex-wrap gap-2">
        <Button
          size="bench"
          variant="primary"
          icon={Save}
          name="then"
          value="stay"
          pending={pending}
          pendingLabel="Saving…"
        >
          Save
        </Button>
        {nextOpenKey ? (
          <Button
            size="bench"
            icon={SkipForward}
            name="then"
            value="go-on"
            pending={pending}
            pendingLabel="Saving…"
          >
            Save and go on
          </Button>
        ) : null}
        {onCancel ? (
          <Button type="button" size="bench" variant="quiet" onClick={onCancel}>
            Leave it as it is
          </Button>
        ) : null}
      </div>
      <InsteadOfAnAnswer kind={values.kind} change={change} />
    </fetcher.Form>
  );
}

function reasonLabel(kind: AnswerDraft["kind"], againstMains: boolean): string {
  switch (kind) {
    case "answer":
      return againstMains ? "Why mains is connected all the same" : "Why the earlier answer is corrected";
    case "not-applicable":
      return "Why this check doesn’t apply to the unit";
    case "not-possible":
      return "Why this check can’t be done";
  }
}

function InsteadOfAnAnswer({
  kind,
  change,
}: {
  kind: AnswerDraft["kind"];
  change: (changes: Partial<AnswerDraft>) => void;
}) {
  if (kind !== "answer") {
    return (
      <Button type="button" size="bench" variant="quiet" onClick={() => change({ kind: "answer" })}>
        Answer the check after all
      </Button>
    );
  }
  return (
    <div className="flex flex-wrap gap-2 border-t border-rule pt-3">
      <Button type="button" size="bench" variant="quiet" onClick={() => change({ kind: "not-applicable" })}>
        Not applicable…
      </Button>
      <Button type="button" size="bench" variant="quiet" onClick={() => change({ kind: "not-possible" })}>
        Not possible…
      </Button>
    </div>
  );
}
