import { Form } from "react-router";
import { Badge } from "~/components/ui/badge";
import { Button } from "~/components/ui/button";
import { type Column, DataTable } from "~/components/ui/data-table";
import { Sheet } from "~/components/ui/sheet";
import { Time } from "~/components/ui/time";
import { type Role, roleTitles } from "~/workflow/roles";

export interface InvitationRow {
  id: number;
  email: string;
  roles: Role[];
  createdAt: Date;
  expiresAt: Date;
  expired: boolean;
}

/** Invitations that nobody has accepted yet; nothing at all when there are none. */
export function InvitationList({
  invitations,
  problem,
}: {
  invitations: readonly InvitationRow[];
  problem: string[] | null | undefined;
}) {
  if (invitations.length === 0 && !problem) return null;
  return (
    <Sheet flush title="Invited, not yet here">
      {problem ? (
        <p role="alert" className="px-4 py-3 font-medium text-fail">
          {problem.join(" ")}
        </p>
      ) : null}
      <DataTable
        caption="Open invitations"
        rows={invitations}
        rowKey={(row) => String(row.id)}
        columns={columns}
      />
    </Sheet>
  );
}

const columns: Column<InvitationRow>[] = [
  {
    id: "email",
    header: "Mail",
    primary: true,
    cell: (row) => <span className="wrap-anywhere">{row.email}</span>,
  },
  { id: "roles", header: "As", cell: (row) => row.roles.map((role) => roleTitles[role]).join(", ") },
  { id: "sent", header: "Sent", nowrap: true, cell: (row) => <Time at={row.createdAt} style="date" /> },
  {
    id: "until",
    header: "Counts until",
    cell: (row) => (row.expired ? <Badge tone="undecided">Expired</Badge> : <Time at={row.expiresAt} />),
  },
  {
    id: "acts",
    header: "Send again or cancel",
    hideHeader: true,
    cell: (row) => (
      <Form method="post" className="flex flex-wrap gap-1">
        <input type="hidden" name="invitation" value={row.id} />
        <Button name="intent" value="resend" variant="quiet">
          Send again <span className="sr-only">to {row.email}</span>
        </Button>
        <Button name="intent" value="cancel" variant="quiet">
          Cancel <span className="sr-only">the invitation of {row.email}</span>
        </Button>
      </Form>
    ),
  },
];
