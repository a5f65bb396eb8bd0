import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { data, Form, Link, redirect, useNavigation } from "react-router";
import { PlainShell } from "~/components/shell/plain-shell";
import { Button } from "~/components/ui/button";
import { Flash, type FlashMessage } from "~/components/ui/flash";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { Sheet } from "~/components/ui/sheet";
import { personContext } from "~/context";
import { authenticateForm } from "~/middleware/authenticator.server";
import { readForm } from "~/middleware/read-form.server";
import { safePath } from "~/middleware/safe-path";
import { signIn } from "~/middleware/session.server";
import { AuthenticationError, ThrottledError } from "~/services/errors";
import type { Route } from "./+types/sign-in";
import { signInSchema } from "./sign-in.schema";

export function loader({ context, url }: Route.LoaderArgs) {
  if (context.get(personContext)) throw redirect(safePath(url.searchParams.get("to")));
  return { flash: messages[url.searchParams.get("done") ?? ""] ?? null };
}

export async function action({ request, context, url }: Route.ActionArgs) {
  const submission = parseWithZod(await readForm(request.clone()), { schema: signInSchema });
  if (submission.status !== "success")
    return data(submission.reply({ hideFields: ["password"] }), { status: 400 });
  try {
    const person = await authenticateForm(request, context);
    const to = safePath(url.searchParams.get("to"));
    return redirect(to, { headers: { "Set-Cookie": await signIn(request, context, person.id) } });
  } catch (error) {
    if (!(error instanceof AuthenticationError || error instanceof ThrottledError)) throw error;
    const reply = submission.reply({ formErrors: [error.message], hideFields: ["password"] });
    return data(reply, { status: error.status });
  }
}

export const meta: Route.MetaFunction = () => [{ title: "Sign in · Mainsgate" }];

export default function SignIn({ loaderData, actionData }: Route.ComponentProps) {
  const busy = useNavigation().formMethod === "POST";
  const [form, fields] = useForm({
    id: "sign-in",
    lastResult: actionData,
    constraint: getZodConstraint(signInSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: signInSchema }),
    shouldValidate: "onSubmit",
    shouldRevalidate: "onInput",
  });
  return (
    <PlainShell>
      <Flash message={loaderData.flash} />
      <Sheet>
        <h1 className="mb-4 text-2xl">Sign in</h1>
        <Form method="post" {...getFormProps(form)} className="space-y-4">
          <FormErrorSummary
            form={form}
            title="You are not signed in"
            labels={{ email: "Mail address", password: "Password" }}
          />
          <InputField
            field={fields.email}
            label="Mail address"
            type="email"
            autoComplete="username"
            autoCapitalize="none"
            spellCheck={false}
          />
          <InputField
            field={fields.password}
            label="Password"
            type="password"
            autoComplete="current-password"
          />
          <div className="flex flex-wrap items-center justify-between gap-3">
            <Button variant="primary" pending={busy} pendingLabel="Signing in…">
              Sign in
            </Button>
            <Link to="/forgotten-password" className="text-link inline-flex min-h-11 items-center text-sm">
              Forgotten your password?
            </Link>
          </div>
        </Form>
      </Sheet>
      <p className="mt-4 text-sm text-ink-soft">
        New here? A workshop’s steward invites people by mail; there is no other way in.
      </p>
    </PlainShell>
  );
}

/** What led here, by the address’s `done`. */
const messages: Record<string, FlashMessage> = {
  "signed-out": { tone: "done", text: "You are signed out." },
  "password-set": {
    tone: "done",
    text: "Your new password is set, and every session was ended. Sign in with it.",
  },
};
