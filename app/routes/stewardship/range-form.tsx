import { getFormProps, type SubmissionResult, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { Form, useNavigation } from "react-router";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { NumberField } from "~/components/ui/number-field";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";
import { rangeSchema, rangeUnits } from "./instrument.schema";

export function RangeForm({ lastResult }: { lastResult: SubmissionResult<string[]> | undefined }) {
  const busy = useNavigation().formData?.get("intent") === "add-range";
  const [form, fields] = useForm({
    id: "range",
    lastResult,
    constraint: getZodConstraint(rangeSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: rangeSchema }),
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet title="Add a range">
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        <FormErrorSummary form={form} labels={labels} />
        <div className="grid gap-4 sm:grid-cols-3">
          <NumberField field={fields.lower} label={labels.lower} />
          <NumberField field={fields.upper} label={labels.upper} />
          <SelectField
            field={fields.unit}
            label={labels.unit}
            placeholder="Choose"
            options={rangeUnits.map((unit) => ({ value: unit, label: unit }))}
          />
          <NumberField field={fields.percent} label={labels.percent} unit="%" />
          <NumberField field={fields.digits} label={labels.digits} />
          <NumberField field={fields.resolution} label={labels.resolution} />
        </div>
        <Button name="intent" value="add-range" pending={busy} pendingLabel="Saving…">
          Add the range
        </Button>
      </Form>
    </Sheet>
  );
}

const labels = {
  lower: "From",
  upper: "To",
  unit: "Unit",
  percent: "Of the reading",
  digits: "Digits",
  resolution: "One digit is",
};
