import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { data, Form, redirect, useNavigation } from "react-router";
import { z } from "zod";
import { PlainShell } from "~/components/shell/plain-shell";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { LinkButton } from "~/components/ui/link-button";
import { Sheet } from "~/components/ui/sheet";
import { database } from "~/services/database.server";
import { AuthenticationError } from "~/services/errors";
import { findReset, resetPassword } from "~/services/people/password-reset.server";
import { readForm } from "~/middleware/read-form.server";
import type { Route } from "./+types/reset";
import { newPasswordField, PASSWORD_LENGTH } from "./password.schema";

const schema = z.object({ password: newPasswordField });

export async function loader({ params }: Route.LoaderArgs) {
  const found = await findReset(database(), params.token, new Date());
  return data({ email: found?.email ?? null }, { status: found ? 200 : 404 });
}

export async function action({ request, params }: Route.ActionArgs) {
  const submission = parseWithZod(await readForm(request), { schema });
  if (submission.status !== "success")
    return data(submission.reply({ hideFields: ["password"] }), { status: 400 });
  try {
    await resetPassword(database(), params.token, submission.value.password, new Date());
  } catch (error) {
    if (!(error instanceof AuthenticationError)) throw error;
    return data(submission.reply({ formErrors: [error.message], hideFields: ["password"] }), {
      status: error.status,
    });
  }
  return redirect("/sign-in?done=password-set");
}

export const meta: Route.MetaFunction = () => [{ title: "New password · Mainsgate" }];

export default function Reset({ loaderData, actionData }: Route.ComponentProps) {
  const busy = useNavigation().formMethod === "POST";
  const [form, fields] = useForm({
    id: "reset",
    lastResult: actionData,
    constraint: getZodConstraint(schema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema }),
    shouldRevalidate: "onInput",
  });
  if (!loaderData.email) {
    return (
      <PlainShell>
        <Sheet>
          <h1 className="text-2xl">This link no longer works</h1>
          <p className="mt-3 mb-4">It was used already, or is older than one hour. Ask for a new one.</p>
          <LinkButton to="/forgotten-password" variant="primary">
            Ask for a new link
          </LinkButton>
        </Sheet>
      </PlainShell>
    );
  }
  return (
    <PlainShell>
      <Sheet>
        <h1 className="mb-2 text-2xl">Set a new password</h1>
        <p className="mb-4 text-ink-soft">
          For {loaderData.email}. Everywhere you are signed in now, you will have to sign in again.
        </p>
        <Form method="post" {...getFormProps(form)} className="space-y-4">
          <FormErrorSummary
            form={form}
            title="The password was not set"
            labels={{ password: "New password" }}
          />
          {/* Lets a password manager know whose password this is. */}
          <input type="hidden" autoComplete="username" value={loaderData.email} readOnly />
          <InputField
            field={fields.password}
            label="New password"
            type="password"
            autoComplete="new-password"
            hint={`At least ${PASSWORD_LENGTH.least} characters. Some words that don’t belong together are good.`}
          />
          <Button variant="primary" pending={busy} pendingLabel="Setting…">
            Set the password
          </Button>
        </Form>
      </Sheet>
    </PlainShell>
  );
}
