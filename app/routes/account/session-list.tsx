import { Form } from "react-router";
import { Badge } from "~/components/ui/badge";
import { Button } from "~/components/ui/button";
import { type Column, DataTable } from "~/components/ui/data-table";
import { Sheet } from "~/components/ui/sheet";
import { Time } from "~/components/ui/time";

export interface SessionRow {
  id: string;
  device: string;
  address: string;
  lastSeenAt: Date;
  createdAt: Date;
  isThisOne: boolean;
}

export function SessionList({
  sessions,
  className,
}: {
  sessions: readonly SessionRow[];
  className?: string;
}) {
  return (
    <Sheet
      flush
      className={className}
      title="Where you are signed in"
      lead="End what you don’t recognise, and change your password."
      actions={
        sessions.length > 1 ? (
          <Form method="post">
            <Button name="intent" value="end-others">
              Sign out everywhere else
            </Button>
          </Form>
        ) : null
      }
    >
      <DataTable caption="Your sessions" rows={sessions} rowKey={(session) => session.id} columns={columns} />
    </Sheet>
  );
}

const columns: Column<SessionRow>[] = [
  {
    id: "device",
    header: "Device",
    primary: true,
    cell: (session) => (
      <span className="inline-flex flex-wrap items-center gap-2">
        {session.device}
        {session.isThisOne ? <Badge tone="copper">This one</Badge> : null}
      </span>
    ),
  },
  { id: "address", header: "Address", cell: (session) => session.address },
  { id: "seen", header: "Last seen", cell: (session) => <Time at={session.lastSeenAt} /> },
  { id: "since", header: "Signed in", cell: (session) => <Time at={session.createdAt} /> },
  {
    id: "end",
    header: "End the session",
    hideHeader: true,
    cell: (session) =>
      session.isThisOne ? null : (
        <Form method="post">
          <input type="hidden" name="session" value={session.id} />
          <Button name="intent" value="end-session" variant="quiet">
            End <span className="sr-only">the session of {session.device}</span>
          </Button>
        </Form>
      ),
  },
];
