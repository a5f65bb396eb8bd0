import { Button } from "~/components/ui/button";
import { ChoiceGroupField } from "~/components/ui/choice-group-field";
import { NumberField } from "~/components/ui/number-field";
import { SelectField } from "~/components/ui/select-field";
import { TextareaField } from "~/components/ui/textarea-field";
import type { Ask } from "~/engine/bench-check";
import { relatedUnits } from "~/engine/scaled-units";
import type { BenchInstrument } from "~/services/bench/load-check.server";
import { dayText } from "~/workflow/day-text";
import { type AnswerDraft, isUsable } from "./answer-draft";

type ReadingAsk = Extract<Ask, { kind: "reading" }>;

/** Value, unit, over-range and instrument of a reading, for gloved hands. */
export function ReadingFields({
  asks,
  values,
  change,
  instruments,
  errors,
}: {
  asks: ReadingAsk;
  values: AnswerDraft;
  change: (changes: Partial<AnswerDraft>) => void;
  instruments: readonly BenchInstrument[];
  errors: Record<string, string[] | undefined>;
}) {
  const usable = instruments.filter(isUsable);
  return (
    <>
      <div className="grid grid-cols-[1fr_auto] items-start gap-3">
        <NumberField
          field={{ name: "value", errors: errors.value }}
          label={asks.quantity}
          size="bench"
          maxLength={24}
          value={values.value}
          onChange={(event) => change({ value: event.currentTarget.value })}
        />
        <SelectField
          field={{ name: "unit", errors: errors.unit }}
          label="Unit"
          size="bench"
          options={relatedUnits(asks.unit).map((unit) => ({ value: unit, label: unit }))}
          value={values.unit}
          onChange={(event) => change({ unit: event.currentTarget.value })}
        />
      </div>
      <ChoiceGroupField
        field={{ name: "bound", errors: errors.bound }}
        label="The display"
        size="bench"
        columns={3}
        options={[
          { value: "shown", label: "shows the value" },
          { value: "over", label: "> over its range" },
          { value: "under", label: "< under its range" },
        ]}
        value={values.bound}
        onChange={(event) => change({ bound: boundOf(event.currentTarget.value) })}
      />
      {usable.length === 0 ? (
        <p role="alert" className="border-l-4 border-undecided bg-undecided-wash px-4 py-2">
          {instruments.length === 0
            ? `The workshop has no ${asks.instrument.kind.replaceAll("-", " ")}. Ask the steward to enter one, or say below why the check can’t be done.`
            : `No ${asks.instrument.kind.replaceAll("-", " ")} is in calibration today, and a reading without calibration proves nothing.`}
        </p>
      ) : null}
      <SelectField
        field={{ name: "instrumentId", errors: errors.instrumentId }}
        label="Instrument"
        hint={`${asks.instrument.kind.replaceAll("-", " ")}, ${asks.instrument.range}`}
        size="bench"
        placeholder="Choose"
        options={instruments.map((instrument) => ({
          value: String(instrument.id),
          label: `${instrument.name}, ${instrument.serial}: ${calibrationWords(instrument)}`,
          disabled: !isUsable(instrument),
        }))}
        value={values.instrumentId}
        onChange={(event) => change({ instrumentId: event.currentTarget.value })}
      />
    </>
  );
}

/** How it was measured, with what the check asks for ready to be taken over. */
export function ConditionsField({
  asks,
  values,
  change,
  errors,
}: {
  asks: ReadingAsk;
  values: AnswerDraft;
  change: (changes: Partial<AnswerDraft>) => void;
  errors: Record<string, string[] | undefined>;
}) {
  return (
    <div>
      <TextareaField
        field={{ name: "conditions", errors: errors.conditions }}
        label="Conditions as they were"
        hint="Test voltage, polarity, switch position"
        optional
        size="bench"
        rows={1}
        maxLength={500}
        value={values.conditions}
        onChange={(event) => change({ conditions: event.currentTarget.value })}
      />
      {asks.conditions.length > 0 ? (
        <Button
          type="button"
          variant="quiet"
          className="mt-1"
          onClick={() => change({ conditions: asks.conditions.join("; ") })}
        >
          As asked: {asks.conditions.join("; ")}
        </Button>
      ) : null}
    </div>
  );
}

function boundOf(value: string): AnswerDraft["bound"] {
  return value === "over" || value === "under" ? value : "shown";
}

function calibrationWords({ calibration, calibrationDue }: BenchInstrument): string {
  switch (calibration) {
    case "in-calibration":
      return `in calibration until ${dayText(calibrationDue)}`;
    case "due-soon":
      return `in calibration, due ${dayText(calibrationDue)}`;
    case "overdue":
      return `OUT OF CALIBRATION since ${dayText(calibrationDue)}`;
    case "not-yet":
      return "calibration dated in the future";
    case "retired":
      return "retired";
  }
}
