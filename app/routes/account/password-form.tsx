import { getFormProps, type SubmissionResult, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { Form, useNavigation } from "react-router";
import { Button } from "~/components/ui/button";
import { InputField } from "~/components/ui/input-field";
import { Sheet } from "~/components/ui/sheet";
import { PASSWORD_LENGTH } from "../auth/password.schema";
import { passwordSchema } from "./account.schema";

export function PasswordForm({
  email,
  lastResult,
}: {
  email: string;
  lastResult: SubmissionResult | undefined;
}) {
  const busy = useNavigation().formData?.get("intent") === "password";
  const [form, fields] = useForm({
    id: "password",
    lastResult,
    constraint: getZodConstraint(passwordSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: passwordSchema }),
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet title="Password" lead="Changing it ends every session but this one.">
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        <input type="hidden" autoComplete="username" value={email} readOnly />
        <InputField
          field={fields.current}
          label="Current password"
          type="password"
          autoComplete="current-password"
        />
        <InputField
          field={fields.password}
          label="New password"
          type="password"
          autoComplete="new-password"
          hint={`At least ${PASSWORD_LENGTH.least} characters. Some words that don’t belong together are good.`}
        />
        <Button name="intent" value="password" pending={busy} pendingLabel="Changing…">
          Change the password
        </Button>
      </Form>
    </Sheet>
  );
}
