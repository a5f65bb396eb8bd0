import { parseWithZod } from "@conform-to/zod/v4";
import { data, Form, useParams } from "react-router";
import { Badge } from "~/components/ui/badge";
import { Button } from "~/components/ui/button";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import { InputField } from "~/components/ui/input-field";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { Time } from "~/components/ui/time";
import { authorise } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import {
  cancelInvitation,
  invite,
  listInvitations,
  resendInvitation,
} from "~/services/people/invitations.server";
import { listMembers } from "~/services/people/members.server";
import { type Role, roleTitles } from "~/workflow/roles";
import type { Route } from "./+types/people";
import { InvitationList } from "./invitation-list";
import { InviteForm } from "./invite-form";
import { peopleSchema } from "./people.schema";

export async function loader({ context, url }: Route.LoaderArgs) {
  const services = authorise(context, "people.read");
  const search = (url.searchParams.get("q") ?? "").slice(0, 120);
  const [members, invitations] = await Promise.all([
    listMembers(services, search),
    listInvitations(services),
  ]);
  return { search, members, invitations };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const services = authorise(context, "people.manage");
  const submission = parseWithZod(await readForm(request), { schema: peopleSchema });
  if (submission.status !== "success")
    return data({ ...submission.reply(), conflict: null }, { status: 400 });
  const { value } = submission;
  const here = `/w/${params.workshop}/people`;
  try {
    switch (value.intent) {
      case "invite":
        await invite(services, value);
        return await redirectWithFlash(here, `${value.email} is invited; the mail is on its way.`);
      case "resend":
        await resendInvitation(services, value.invitation);
        return await redirectWithFlash(
          here,
          "The invitation was sent again. The link in the old mail no longer works.",
        );
      case "cancel":
        await cancelInvitation(services, value.invitation);
        return await redirectWithFlash(here, "The invitation is cancelled.");
    }
  } catch (error) {
    return refuseForm(error, submission);
  }
}

export const meta: Route.MetaFunction = () => [{ title: "People · Mainsgate" }];

export default function People({ loaderData, actionData }: Route.ComponentProps) {
  const { search, members, invitations } = loaderData;
  const { workshop } = useParams();
  const intent = actionData?.initialValue?.intent;
  return (
    <>
      <PageHeader title="People" lead="Who holds which role in this workshop, and who is invited." />
      <div className="grid items-start gap-5 lg:grid-cols-[minmax(0,5fr)_minmax(18rem,2fr)]">
        <div className="grid gap-5">
          <Sheet
            flush
            title="In the workshop"
            actions={
              <Form method="get" role="search" className="flex items-end gap-2">
                <InputField
                  field={{ name: "q", initialValue: search }}
                  label="Search by name or mail"
                  hideLabel
                  type="search"
                  placeholder="Name or mail"
                />
                <Button>Search</Button>
              </Form>
            }
          >
            <DataTable
              caption="People in the workshop"
              rows={members}
              rowKey={(member) => String(member.id)}
              rowHref={(member) => `/w/${workshop}/people/${member.id}`}
              columns={columns}
              empty={
                <EmptyState
                  title="Nobody fits this search"
                  action={<LinkButton to="?">Show everybody</LinkButton>}
                />
              }
            />
          </Sheet>
          <InvitationList
            invitations={invitations}
            problem={intent === "resend" || intent === "cancel" ? actionData?.error?.[""] : undefined}
          />
        </div>
        <InviteForm lastResult={intent === "invite" ? actionData : undefined} />
      </div>
    </>
  );
}

interface MemberRow {
  id: number;
  name: string;
  email: string;
  roles: Role[];
  since: Date;
}

const columns: Column<MemberRow>[] = [
  { id: "name", header: "Name", primary: true, cell: (member) => member.name },
  {
    id: "roles",
    header: "Roles",
    cell: (member) => (
      <span className="flex flex-wrap gap-1">
        {member.roles.map((role) => (
          <Badge key={role}>{roleTitles[role]}</Badge>
        ))}
      </span>
    ),
  },
  { id: "email", header: "Mail", cell: (member) => <span className="wrap-anywhere">{member.email}</span> },
  { id: "since", header: "Since", nowrap: true, cell: (member) => <Time at={member.since} style="date" /> },
];
