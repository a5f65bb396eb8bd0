import { getFormProps, type SubmissionResult, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { Form, Link, useNavigation } from "react-router";
import { Button } from "~/components/ui/button";
import { CheckboxField } from "~/components/ui/checkbox-field";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { NumberField } from "~/components/ui/number-field";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";
import { addLicenceSchema } from "./licence.schema";

export function LicenceForm({
  electricians,
  peopleHref,
  lastResult,
}: {
  electricians: readonly { id: number; name: string }[];
  peopleHref: string;
  lastResult: SubmissionResult<string[]> | undefined;
}) {
  const busy = useNavigation().formData?.get("intent") === "add";
  const [form, fields] = useForm({
    id: "licence",
    lastResult,
    constraint: getZodConstraint(addLicenceSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: addLicenceSchema }),
    shouldRevalidate: "onInput",
  });
  if (electricians.length === 0) {
    return (
      <Sheet title="Record a licence">
        <p>
          Nobody here is an electrician yet. Give somebody the role under{" "}
          <Link to={peopleHref} className="text-link">
            People
          </Link>{" "}
          first.
        </p>
      </Sheet>
    );
  }
  return (
    <Sheet title="Record a licence">
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        <FormErrorSummary form={form} labels={labels} />
        <SelectField
          field={fields.personId}
          label={labels.personId}
          placeholder="Choose"
          options={electricians.map(({ id, name }) => ({ value: String(id), label: name }))}
        />
        <InputField
          field={fields.holderName}
          label={labels.holderName}
          hint="As the licence itself says it. The electrician signs with this name, and records carry it."
          autoComplete="off"
        />
        <InputField field={fields.number} label={labels.number} autoComplete="off" />
        <InputField field={fields.authority} label={labels.authority} autoComplete="off" />
        <div className="grid gap-4 sm:grid-cols-2">
          <InputField field={fields.validFrom} label={labels.validFrom} type="date" />
          <InputField field={fields.validTo} label={labels.validTo} type="date" />
        </div>
        <NumberField
          field={fields.maxSupplyVolts}
          label={labels.maxSupplyVolts}
          unit="V"
          hint="The highest supply voltage of equipment that it covers."
        />
        <CheckboxField field={fields.coversBatteries} label="It covers equipment with batteries" />
        <Button variant="primary" name="intent" value="add" pending={busy} pendingLabel="Saving…">
          Record the licence
        </Button>
      </Form>
    </Sheet>
  );
}

const labels = {
  personId: "Electrician",
  holderName: "Holder’s name",
  number: "Number",
  authority: "Issued by",
  validFrom: "Counts from",
  validTo: "Counts until",
  maxSupplyVolts: "Supply up to",
};
