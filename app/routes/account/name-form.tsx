import { getFormProps, type SubmissionResult, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { Form, useNavigation } from "react-router";
import { Button } from "~/components/ui/button";
import { InputField } from "~/components/ui/input-field";
import { Sheet } from "~/components/ui/sheet";
import { renameSchema } from "./account.schema";

export function NameForm({ name, lastResult }: { name: string; lastResult: SubmissionResult | undefined }) {
  const busy = useNavigation().formData?.get("intent") === "rename";
  const [form, fields] = useForm({
    id: "rename",
    lastResult,
    defaultValue: { name },
    constraint: getZodConstraint(renameSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: renameSchema }),
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet
      title="Name"
      lead="It stands under what you do. Records that were signed keep the name they were signed with."
    >
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        <InputField field={fields.name} label="Your name" autoComplete="name" />
        <Button name="intent" value="rename" pending={busy} pendingLabel="Saving…">
          Save the name
        </Button>
      </Form>
    </Sheet>
  );
}
