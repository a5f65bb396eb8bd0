import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { data, Form, Link, useNavigation } from "react-router";
import { z } from "zod";
import { PlainShell } from "~/components/shell/plain-shell";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { Sheet } from "~/components/ui/sheet";
import { clientAddressContext } from "~/context";
import { environment } from "~/environment.server";
import { database } from "~/services/database.server";
import { ThrottledError } from "~/services/errors";
import { requestReset } from "~/services/people/password-reset.server";
import { readForm } from "~/middleware/read-form.server";
import type { Route } from "./+types/forgotten-password";
import { emailField } from "./sign-in.schema";

const schema = z.object({ email: emailField });

export function loader() {
  return { mailPage: environment().DEMO_MAIL_URL ?? null };
}

export async function action({ request, context }: Route.ActionArgs) {
  const submission = parseWithZod(await readForm(request), { schema });
  if (submission.status !== "success")
    return data({ sentTo: null, reply: submission.reply() }, { status: 400 });
  const { email } = submission.value;
  try {
    const address = context.get(clientAddressContext);
    await requestReset(database(), { email, address, appUrl: environment().APP_URL }, new Date());
  } catch (error) {
    if (!(error instanceof ThrottledError)) throw error;
    return data({ sentTo: null, reply: submission.reply({ formErrors: [error.message] }) }, { status: 429 });
  }
  return data({ sentTo: email, reply: submission.reply() });
}

export const meta: Route.MetaFunction = () => [{ title: "Forgotten password · Mainsgate" }];

export default function ForgottenPassword({ loaderData, actionData }: Route.ComponentProps) {
  const busy = useNavigation().formMethod === "POST";
  const [form, fields] = useForm({
    id: "forgotten",
    lastResult: actionData?.reply,
    constraint: getZodConstraint(schema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema }),
    shouldRevalidate: "onInput",
  });
  if (actionData?.sentTo) {
    return (
      <PlainShell>
        <Sheet>
          <h1 className="text-2xl">Look at your mail</h1>
          <p className="mt-3" role="status">
            If <strong>{actionData.sentTo}</strong> belongs to somebody here, a mail with a link is on its
            way. The link works once, within one hour.
          </p>
          <p className="mt-3 text-sm text-ink-soft">
            No mail after some minutes? Look among the unwanted mail, and check that the address is the one
            that your workshop invited.
          </p>
          {loaderData.mailPage ? (
            <p className="mt-3 text-sm">
              This installation keeps its mail to itself:{" "}
              <a href={loaderData.mailPage} className="text-link">
                read it here
              </a>
              .
            </p>
          ) : null}
          <BackToSignIn />
        </Sheet>
      </PlainShell>
    );
  }
  return (
    <PlainShell>
      <Sheet>
        <h1 className="mb-2 text-2xl">Forgotten your password?</h1>
        <p className="mb-4 text-ink-soft">
          Enter your mail address, and we send a link with which you set a new one.
        </p>
        <Form method="post" {...getFormProps(form)} className="space-y-4">
          <FormErrorSummary form={form} title="No mail was sent" labels={{ email: "Mail address" }} />
          <InputField
            field={fields.email}
            label="Mail address"
            type="email"
            autoComplete="username"
            autoCapitalize="none"
            spellCheck={false}
          />
          <Button variant="primary" pending={busy} pendingLabel="Sending…">
            Send the link
          </Button>
        </Form>
        <BackToSignIn />
      </Sheet>
    </PlainShell>
  );
}

function BackToSignIn() {
  return (
    <p className="mt-4">
      <Link to="/sign-in" className="text-link inline-flex min-h-11 items-center text-sm">
        Back to the sign-in page
      </Link>
    </p>
  );
}
