import { getFormProps, type SubmissionResult, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { Form, useNavigation } from "react-router";
import { Button } from "~/components/ui/button";
import { ChoiceGroupField } from "~/components/ui/choice-group-field";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { Sheet } from "~/components/ui/sheet";
import { roleDuties, roles, roleTitles } from "~/workflow/roles";
import { inviteSchema } from "./people.schema";

export function InviteForm({ lastResult }: { lastResult: SubmissionResult<string[]> | undefined }) {
  const busy = useNavigation().formData?.get("intent") === "invite";
  const [form, fields] = useForm({
    id: "invite",
    lastResult,
    constraint: getZodConstraint(inviteSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: inviteSchema }),
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet title="Invite somebody" lead="They get a mail with a link that works once, within seven days.">
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        <FormErrorSummary
          form={form}
          title="Nobody was invited"
          labels={{ name: "Name", email: "Mail address", roles: "Roles" }}
        />
        <InputField field={fields.name} label="Name" autoComplete="off" />
        <InputField field={fields.email} label="Mail address" type="email" autoComplete="off" />
        <ChoiceGroupField field={fields.roles} label="Roles" multiple options={roleOptions} />
        <Button variant="primary" name="intent" value="invite" pending={busy} pendingLabel="Inviting…">
          Invite
        </Button>
      </Form>
    </Sheet>
  );
}

export const roleOptions = roles.map((role) => ({
  value: role,
  label: roleTitles[role],
  hint: roleDuties[role],
}));
