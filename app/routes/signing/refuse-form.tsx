import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { FileX2 } from "lucide-react";
import { Form, useNavigation } from "react-router";
import { SignatureFields } from "~/components/signature-fields";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { TextareaField } from "~/components/ui/textarea-field";
import { useKeptForm } from "~/components/use-kept-form";
import type { FormRefusal } from "~/middleware/form-refusal.server";
import { refuseSchema } from "./decide.schema";

/** What this tab keeps until the form was taken. */
const keptFields = ["statement"];

export interface RefuseFormProps {
  version: number;
  signer: string;
  result: FormRefusal | undefined;
  reloadHref: string;
}

/** Refuses with reasons: the end of this unit's way, with a record of its own. */
export function RefuseForm({ version, signer, result, reloadHref }: RefuseFormProps) {
  const pending = useNavigation().formData?.get("act") === "refuse";
  const kept = useKeptForm("refuse", keptFields);
  const [form, fields] = useForm({
    id: "refuse",
    lastResult: result,
    constraint: getZodConstraint(refuseSchema),
    defaultValue: { signatureMethod: "drawn" },
    onValidate: ({ formData }) => parseWithZod(formData, { schema: refuseSchema }),
    shouldValidate: "onSubmit",
    shouldRevalidate: "onInput",
  });
  return (
    <Form method="post" {...getFormProps(form)} ref={kept.ref} className="space-y-6">
      {result?.conflict ? <ConflictNotice message={result.conflict} reloadHref={reloadHref} /> : null}
      {kept.notice}
      <FormErrorSummary
        form={form}
        labels={{
          statement: "Reasons",
          signatureImage: "Drawn signature",
          typedName: "Your name",
          password: "Password",
        }}
        title="It was not refused"
      />
      <p className="max-w-prose">
        A refusal is final for this unit: it must not be plugged in, and a record says so. If it can be put
        right, send it back instead.
      </p>
      <input type="hidden" name="act" value="refuse" />
      <input type="hidden" name="version" value={version} />
      <TextareaField field={fields.statement} label="Reasons" rows={4} />
      <SignatureFields fields={fields} signer={signer} />
      <Button variant="danger" size="bench" icon={FileX2} pending={pending} pendingLabel="Refusing…">
        Refuse it
      </Button>
    </Form>
  );
}
