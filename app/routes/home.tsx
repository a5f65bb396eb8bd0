import { Building2 } from "lucide-react";
import { Link, redirect } from "react-router";
import { PlainShell } from "~/components/shell/plain-shell";
import { Sheet } from "~/components/ui/sheet";
import { SignOutButton } from "~/components/shell/sign-out-button";
import { requirePerson } from "~/middleware/session.server";
import { database } from "~/services/database.server";
import { listWorkshops } from "~/services/people/workshops.server";
import type { Route } from "./+types/home";

export async function loader({ context, url }: Route.LoaderArgs) {
  const person = requirePerson(context, url);
  const workshops = await listWorkshops(database(), person.id);
  const only = workshops.length === 1 ? workshops[0] : undefined;
  if (only) throw redirect(`/w/${only.slug}`);
  return { person, workshops };
}

export const meta: Route.MetaFunction = () => [{ title: "Workshops · Mainsgate" }];

export default function Home({ loaderData: { person, workshops } }: Route.ComponentProps) {
  return (
    <PlainShell>
      <Sheet>
        <h1 className="text-2xl">Your workshops</h1>
        <p className="mt-1 mb-4 text-sm text-ink-soft">
          Signed in as {person.name} ({person.email}).
        </p>
        {workshops.length === 0 ? (
          <p>
            You belong to no workshop at present. A workshop’s steward can invite you; the invitation comes by
            mail.
          </p>
        ) : (
          <ul className="divide-y divide-rule">
            {workshops.map((workshop) => (
              <li key={workshop.slug}>
                <Link
                  to={`/w/${workshop.slug}`}
                  className="flex min-h-14 items-center gap-3 font-semibold hover:text-copper"
                >
                  <Building2 aria-hidden size={20} className="shrink-0 text-ink-soft" />
                  {workshop.name}
                </Link>
              </li>
            ))}
          </ul>
        )}
        <div className="mt-4 flex flex-wrap items-center gap-4 border-t border-rule pt-4">
          <Link to="/account" className="text-link inline-flex min-h-11 items-center">
            Account and sessions
          </Link>
          <SignOutButton />
        </div>
      </Sheet>
    </PlainShell>
  );
}
