import { getFormProps, type SubmissionResult, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import type { ReactNode } from "react";
import { Form, useNavigation } from "react-router";
import type { z } from "zod";
import { Button } from "~/components/ui/button";
import { ChoiceGroupField } from "~/components/ui/choice-group-field";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { NumberField } from "~/components/ui/number-field";
import { Sheet } from "~/components/ui/sheet";
import { TextareaField } from "~/components/ui/textarea-field";
import { useKeptForm } from "~/components/use-kept-form";
import { unitFieldLabels as labels, unitFormSchema } from "./unit-form.schema";

/** What this tab keeps until the form was taken. */
const keptFields = Object.keys(labels);

export interface UnitFormProps {
  lastResult: SubmissionResult | null | undefined;
  /** As the inputs show them. */
  initial?: z.input<typeof unitFormSchema>;
  /** Of the unit that is being changed. */
  version?: number;
  submit: string;
  cancel: ReactNode;
}

/** What is said about a unit beside its map: for a new one, and for changing it. */
export function UnitForm({ lastResult, initial, version, submit, cancel }: UnitFormProps) {
  const busy = useNavigation().formMethod === "POST";
  const kept = useKeptForm("unit", keptFields);
  const [form, fields] = useForm<z.input<typeof unitFormSchema>, z.output<typeof unitFormSchema>>({
    id: "unit",
    lastResult,
    defaultValue: initial,
    constraint: getZodConstraint(unitFormSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: unitFormSchema }),
    shouldValidate: "onSubmit",
    shouldRevalidate: "onInput",
  });
  return (
    <Form method="post" {...getFormProps(form)} ref={kept.ref} className="space-y-5">
      {kept.notice}
      <FormErrorSummary form={form} labels={labels} />
      {version === undefined ? null : <input type="hidden" name="version" value={version} />}
      <Sheet title="The unit">
        <div className="grid gap-4">
          <InputField field={fields.name} label={labels.name} maxLength={120} autoComplete="off" />
          <TextareaField
            field={fields.purpose}
            label={labels.purpose}
            hint="What it does, and who will use it."
            rows={3}
          />
          <InputField
            field={fields.placeOfUse}
            label={labels.placeOfUse}
            hint="Room, stage, lab or outdoors; dry or damp."
            autoComplete="off"
          />
        </div>
      </Sheet>
      <Sheet title="Supply and protection">
        <div className="grid gap-4 sm:grid-cols-2">
          <NumberField
            field={fields.supplyVolts}
            label={labels.supplyVolts}
            hint="The mains it is meant for: 230 V in Europe and Britain, 120 V in North America."
            unit="V"
          />
          <NumberField
            field={fields.supplyHertz}
            label={labels.supplyHertz}
            hint="50 Hz or 60 Hz."
            unit="Hz"
          />
          <ChoiceGroupField
            field={fields.protectionClass}
            label={labels.protectionClass}
            columns={2}
            className="sm:col-span-2"
            options={[
              { value: "I", label: "Class I", hint: "Touchable metal is joined to protective earth." },
              {
                value: "II",
                label: "Class II",
                hint: "Double or reinforced insulation; no protective earth.",
              },
            ]}
          />
        </div>
      </Sheet>
      <Sheet
        title="What sets limits"
        lead="Leave empty what you don’t know. The engine then says where it matters."
      >
        <div className="grid gap-4 sm:grid-cols-2">
          <NumberField
            field={fields.cordLengthM}
            label={labels.cordLengthM}
            hint="From the plug to where it enters the unit."
            unit="m"
            optional
          />
          <NumberField
            field={fields.cordAreaMm2}
            label={labels.cordAreaMm2}
            hint="Printed on the cord: 3 G 0.75 means 0.75 mm²."
            unit="mm²"
            optional
          />
          <NumberField
            field={fields.altitudeM}
            label={labels.altitudeM}
            hint="Of the place of use; above 2000 m gaps must be wider."
            unit="m"
            optional
          />
          <ChoiceGroupField
            field={fields.handheld}
            label={labels.handheld}
            columns={3}
            className="sm:col-span-2"
            options={[
              { value: "no", label: "No" },
              { value: "yes", label: "Yes" },
              { value: "unknown", label: "Not known" },
            ]}
          />
        </div>
      </Sheet>
      <div className="flex flex-wrap gap-3">
        <Button variant="primary" pending={busy} pendingLabel="Saving…">
          {submit}
        </Button>
        {cancel}
      </div>
    </Form>
  );
}
