import { parseWithZod } from "@conform-to/zod/v4";
import { data, redirect } from "react-router";
import { PlainShell } from "~/components/shell/plain-shell";
import { SignOutButton } from "~/components/shell/sign-out-button";
import { Flash } from "~/components/ui/flash";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { clientAddressContext } from "~/context";
import { redirectWithFlash, takeFlash } from "~/middleware/flash.server";
import { readForm } from "~/middleware/read-form.server";
import { currentSessionHash, requirePerson } from "~/middleware/session.server";
import { database } from "~/services/database.server";
import { AuthenticationError, ThrottledError } from "~/services/errors";
import { renamePerson, revokeOtherSessions } from "~/services/people/account.server";
import { changePassword } from "~/services/people/password-reset.server";
import { listSessions, revokeSession } from "~/services/people/sessions.server";
import type { Route } from "./+types/account";
import { accountSchema } from "./account.schema";
import { deviceOf } from "./device";
import { NameForm } from "./name-form";
import { PasswordForm } from "./password-form";
import { SessionList } from "./session-list";

export async function loader({ request, context, url }: Route.LoaderArgs) {
  const person = requirePerson(context, url);
  const [sessions, own, { flash, headers }] = await Promise.all([
    listSessions(database(), person.id, new Date()),
    currentSessionHash(request),
    takeFlash(request),
  ]);
  const shown = sessions.map((session) => ({
    id: session.idHash,
    device: deviceOf(session.userAgent),
    address: session.ip,
    lastSeenAt: session.lastSeenAt,
    createdAt: session.createdAt,
    isThisOne: session.idHash === own,
  }));
  return data({ person, sessions: shown, flash }, { headers });
}

export async function action({ request, context, url }: Route.ActionArgs) {
  const person = requirePerson(context, url);
  const own = await currentSessionHash(request);
  if (!own) throw redirect("/sign-in");
  const submission = parseWithZod(await readForm(request), { schema: accountSchema });
  if (submission.status !== "success") {
    return data(submission.reply({ hideFields: ["current", "password"] }), { status: 400 });
  }
  const { value } = submission;
  switch (value.intent) {
    case "rename":
      await renamePerson(database(), person.id, value.name, new Date());
      return redirectWithFlash("/account", "Your name is changed.");
    case "end-session":
      await revokeSession(database(), person.id, value.session);
      return redirectWithFlash("/account", "That session is ended.");
    case "end-others": {
      const ended = await revokeOtherSessions(database(), person.id, own);
      return redirectWithFlash(
        "/account",
        ended === 1 ? "One session is ended." : `${ended} sessions are ended.`,
      );
    }
    case "password":
      try {
        const { current, password } = value;
        const address = context.get(clientAddressContext);
        await changePassword(
          database(),
          person,
          { current, password, address, keepSession: own },
          new Date(),
        );
        return await redirectWithFlash(
          "/account",
          "Your password is changed, and all other sessions are ended.",
        );
      } catch (error) {
        if (!(error instanceof AuthenticationError || error instanceof ThrottledError)) throw error;
        const fieldErrors = { current: [error.message] };
        return data(submission.reply({ fieldErrors, hideFields: ["current", "password"] }), {
          status: error.status,
        });
      }
  }
}

export const meta: Route.MetaFunction = () => [{ title: "Account · Mainsgate" }];

export default function Account({ loaderData, actionData }: Route.ComponentProps) {
  const { person, sessions, flash } = loaderData;
  const intent = actionData?.initialValue?.intent;
  return (
    <PlainShell wide>
      <Flash message={flash} />
      <PageHeader
        title="Your account"
        lead={person.email}
        actions={
          <>
            <LinkButton to="/">To your workshops</LinkButton>
            <SignOutButton />
          </>
        }
      />
      <div className="grid gap-5 lg:grid-cols-2">
        <NameForm name={person.name} lastResult={intent === "rename" ? actionData : undefined} />
        <PasswordForm email={person.email} lastResult={intent === "password" ? actionData : undefined} />
        <SessionList sessions={sessions} className="lg:col-span-2" />
      </div>
    </PlainShell>
  );
}
