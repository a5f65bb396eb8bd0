import { getFormProps, type SubmissionResult, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { Form, useNavigation } from "react-router";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { Sheet } from "~/components/ui/sheet";
import { recalibrateSchema } from "./instrument.schema";

export function RecalibrateForm({ lastResult }: { lastResult: SubmissionResult<string[]> | undefined }) {
  const busy = useNavigation().formData?.get("intent") === "recalibrate";
  const [form, fields] = useForm({
    id: "calibration",
    lastResult,
    constraint: getZodConstraint(recalibrateSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: recalibrateSchema }),
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet title="Record a new calibration">
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        <FormErrorSummary form={form} labels={labels} />
        <div className="grid gap-4 sm:grid-cols-2">
          <InputField field={fields.calibratedOn} label={labels.calibratedOn} type="date" />
          <InputField field={fields.calibrationDue} label={labels.calibrationDue} type="date" />
        </div>
        <InputField field={fields.certificate} label={labels.certificate} autoComplete="off" />
        <Button name="intent" value="recalibrate" pending={busy} pendingLabel="Saving…">
          Record the calibration
        </Button>
      </Form>
    </Sheet>
  );
}

const labels = { calibratedOn: "Calibrated on", calibrationDue: "Counts until", certificate: "Certificate" };
