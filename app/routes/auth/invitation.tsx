import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { data, Form, useNavigation } from "react-router";
import { z } from "zod";
import { PlainShell } from "~/components/shell/plain-shell";
import { SignOutButton } from "~/components/shell/sign-out-button";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { Sheet } from "~/components/ui/sheet";
import { clientAddressContext, personContext, type SignedInPerson } from "~/context";
import { redirectWithFlash } from "~/middleware/flash.server";
import { readForm } from "~/middleware/read-form.server";
import { signIn } from "~/middleware/session.server";
import { database } from "~/services/database.server";
import { AuthenticationError, ConflictError, ThrottledError } from "~/services/errors";
import { acceptInvitation, type Acceptance, findInvitation } from "~/services/people/invitations.server";
import { roleDuties, roleTitles } from "~/workflow/roles";
import type { Route } from "./+types/invitation";
import { nameField } from "./name.schema";
import { newPasswordField, PASSWORD_LENGTH } from "./password.schema";

/** Which of the three ways to accept the form stands for. */
const schema = z.discriminatedUnion("way", [
  z.object({ way: z.literal("new"), name: nameField, password: newPasswordField }),
  z.object({ way: z.literal("password"), password: z.string({ error: "Enter your password." }).max(200) }),
  z.object({ way: z.literal("signed-in") }),
]);

type Way = z.infer<typeof schema>["way"] | "somebody-else";

export async function loader({ params, context }: Route.LoaderArgs) {
  const invitation = await findInvitation(database(), params.token, new Date());
  if (!invitation) return data({ invitation: null }, { status: 404 });
  const { personId, isNew, ...shown } = invitation;
  return data({ invitation: { ...shown, way: wayFor(context.get(personContext), personId, isNew) } });
}

function wayFor(person: SignedInPerson | null, invitedId: number, isNew: boolean): Way {
  if (person) return person.id === invitedId ? "signed-in" : "somebody-else";
  return isNew ? "new" : "password";
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const submission = parseWithZod(await readForm(request), { schema });
  if (submission.status !== "success")
    return data(submission.reply({ hideFields: ["password"] }), { status: 400 });
  const person = context.get(personContext);
  const acceptance = acceptanceOf(submission.value, person, context.get(clientAddressContext));
  try {
    if (!acceptance) throw new AuthenticationError("You are no longer signed in. Load this page again.");
    const joined = await acceptInvitation(database(), params.token, acceptance, new Date());
    const answer = await redirectWithFlash(
      `/w/${joined.workshop.slug}`,
      `Welcome to ${joined.workshop.name}.`,
    );
    if (!person) answer.headers.append("Set-Cookie", await signIn(request, context, joined.personId));
    return answer;
  } catch (error) {
    const told =
      error instanceof AuthenticationError ||
      error instanceof ThrottledError ||
      error instanceof ConflictError;
    if (!told) throw error;
    const reply = submission.reply({ formErrors: [error.message], hideFields: ["password"] });
    return data(reply, { status: error.status });
  }
}

function acceptanceOf(
  value: z.infer<typeof schema>,
  person: SignedInPerson | null,
  address: string,
): Acceptance | null {
  switch (value.way) {
    case "new":
      return { kind: "new", name: value.name, password: value.password };
    case "password":
      return { kind: "password", password: value.password, address };
    case "signed-in":
      return person ? { kind: "signed-in", person } : null;
  }
}

export const meta: Route.MetaFunction = () => [{ title: "Invitation · Mainsgate" }];

export default function Invitation({ loaderData, actionData }: Route.ComponentProps) {
  const { invitation } = loaderData;
  if (!invitation) {
    return (
      <PlainShell>
        <Sheet>
          <h1 className="text-2xl">This invitation no longer counts</h1>
          <p className="mt-3">
            It was used or cancelled, or is older than a week. The workshop’s steward can send you a new one.
          </p>
        </Sheet>
      </PlainShell>
    );
  }
  return (
    <PlainShell>
      <Sheet>
        <h1 className="mb-2 text-2xl">
          Join <bdi>{invitation.workshop.name}</bdi>
        </h1>
        <p>
          {invitation.email} is invited to {invitation.workshop.name} as:
        </p>
        <dl className="my-4 space-y-2 border-l-2 border-rule-strong pl-4">
          {invitation.roles.map((role) => (
            <div key={role}>
              <dt className="font-semibold">{roleTitles[role]}</dt>
              <dd className="text-sm text-ink-soft">{roleDuties[role]}</dd>
            </div>
          ))}
        </dl>
        {invitation.way === "somebody-else" ? (
          <>
            <p className="mb-4">
              You are signed in as somebody else. Sign out first, then open the link again.
            </p>
            <SignOutButton />
          </>
        ) : (
          <AcceptForm
            way={invitation.way}
            name={invitation.name}
            email={invitation.email}
            reply={actionData}
          />
        )}
      </Sheet>
    </PlainShell>
  );
}

function AcceptForm({
  way,
  name,
  email,
  reply,
}: {
  way: Exclude<Way, "somebody-else">;
  name: string;
  email: string;
  reply: Route.ComponentProps["actionData"];
}) {
  const busy = useNavigation().formMethod === "POST";
  const [form, fields] = useForm({
    id: "join",
    lastResult: reply,
    constraint: getZodConstraint(schema),
    defaultValue: { way, name },
    onValidate: ({ formData }) => parseWithZod(formData, { schema }),
    shouldRevalidate: "onInput",
  });
  return (
    <Form method="post" {...getFormProps(form)} className="space-y-4">
      <FormErrorSummary
        form={form}
        title="You have not joined yet"
        labels={{ name: "Your name", password: "Password" }}
      />
      <input type="hidden" name="way" value={way} />
      {way === "new" ? (
        <>
          <InputField
            field={fields.name}
            label="Your name"
            autoComplete="name"
            hint="As it shall stand under what you do here, and in records."
          />
          <input type="hidden" autoComplete="username" value={email} readOnly />
          <InputField
            field={fields.password}
            label="Choose a password"
            type="password"
            autoComplete="new-password"
            hint={`At least ${PASSWORD_LENGTH.least} characters. Some words that don’t belong together are good.`}
          />
        </>
      ) : null}
      {way === "password" ? (
        <InputField
          field={fields.password}
          label="Your password for Mainsgate"
          type="password"
          autoComplete="current-password"
          hint="You have one already, from another workshop."
        />
      ) : null}
      <Button variant="primary" pending={busy} pendingLabel="Joining…">
        Join the workshop
      </Button>
    </Form>
  );
}
