import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { Undo2 } from "lucide-react";
import { Form, useNavigation } from "react-router";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { ChoiceGroupField } from "~/components/ui/choice-group-field";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { TextareaField } from "~/components/ui/textarea-field";
import { useKeptForm } from "~/components/use-kept-form";
import type { FormRefusal } from "~/middleware/form-refusal.server";
import { sendBackSchema } from "./decide.schema";

/** What this tab keeps until the form was taken. */
const keptFields = ["reason", "severity"];

export interface SendBackFormProps {
  version: number;
  result: FormRefusal | undefined;
  reloadHref: string;
}

/** Sends the unit back to its builder with one more finding. */
export function SendBackForm({ version, result, reloadHref }: SendBackFormProps) {
  const pending = useNavigation().formData?.get("act") === "send-back";
  const kept = useKeptForm("send-back", keptFields);
  const [form, fields] = useForm({
    id: "send-back",
    lastResult: result,
    constraint: getZodConstraint(sendBackSchema),
    defaultValue: { severity: "defect" },
    onValidate: ({ formData }) => parseWithZod(formData, { schema: sendBackSchema }),
    shouldValidate: "onSubmit",
    shouldRevalidate: "onInput",
  });
  return (
    <Form method="post" {...getFormProps(form)} ref={kept.ref} className="space-y-6">
      {result?.conflict ? <ConflictNotice message={result.conflict} reloadHref={reloadHref} /> : null}
      {kept.notice}
      <FormErrorSummary form={form} labels={{ reason: "Reason" }} title="It was not sent back" />
      <p className="max-w-prose">
        What you write becomes a finding: the builder answers it in a new revision, an inspector closes it,
        and the unit comes back here.
      </p>
      <input type="hidden" name="act" value="send-back" />
      <input type="hidden" name="version" value={version} />
      <TextareaField field={fields.reason} label="What stands in the way" rows={4} />
      <ChoiceGroupField
        field={fields.severity}
        label="How grave it is"
        columns={3}
        options={[
          { value: "danger", label: "Danger", hint: "Somebody could be hurt" },
          { value: "defect", label: "Defect", hint: "Must be put right" },
          { value: "advice", label: "Advice", hint: "Would be better so" },
        ]}
      />
      <Button variant="primary" size="bench" icon={Undo2} pending={pending} pendingLabel="Sending back…">
        Send it back to the builder
      </Button>
    </Form>
  );
}
