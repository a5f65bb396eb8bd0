import type { ReactNode } from "react";
import { data, isRouteErrorResponse, Outlet, useMatches, useRouteError } from "react-router";
import { AppShell } from "~/components/shell/app-shell";
import { ErrorPage } from "~/components/shell/error-page";
import { PlainShell } from "~/components/shell/plain-shell";
import { workshopContext } from "~/context";
import { authorise } from "~/middleware/authorise.server";
import { takeFlash } from "~/middleware/flash.server";
import { workshopMiddleware } from "~/middleware/workshop.server";
import { listWorkshops } from "~/services/people/workshops.server";
import { roleTitles } from "~/workflow/roles";
import type { Route } from "./+types/layout";
import { navigationFor } from "./navigation";
import { useQueueCounts, type WaitingCounts } from "./use-queue-counts";

export const middleware: Route.MiddlewareFunction[] = [workshopMiddleware];

export async function loader({ request, context }: Route.LoaderArgs) {
  const { db, person } = authorise(context, "workshop.visit");
  const { slug, name, timeZone, isDemo, roles } = context.get(workshopContext);
  const [workshops, { flash, headers }] = await Promise.all([
    listWorkshops(db, person.id),
    takeFlash(request),
  ]);
  return data({ person, workshop: { slug, name, timeZone, isDemo, roles }, workshops, flash }, { headers });
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `${loaderData.workshop.name} · Mainsgate` : "Mainsgate" },
];

export default function WorkshopLayout({ loaderData }: Route.ComponentProps) {
  const counts = useQueueCounts(loaderData.workshop.slug);
  return (
    <Shell {...loaderData} counts={counts}>
      <Outlet context={counts} />
    </Shell>
  );
}

/** Keeps the shell around the error of a page inside it; the workshop's own refusal stands alone. */
export function ErrorBoundary({ loaderData }: Route.ErrorBoundaryProps) {
  const error = useRouteError();
  if (!loaderData) {
    return (
      <PlainShell>
        <ErrorPage error={error} />
      </PlainShell>
    );
  }
  return (
    <Shell {...loaderData} counts={null}>
      {isRouteErrorResponse(error) ? <title>{`Error ${error.status} · Mainsgate`}</title> : null}
      <ErrorPage error={error} homeHref={`/w/${loaderData.workshop.slug}`} />
    </Shell>
  );
}

function Shell({
  person,
  workshop,
  workshops,
  flash,
  counts,
  children,
}: Route.ComponentProps["loaderData"] & { counts: WaitingCounts | null; children: ReactNode }) {
  const focus = useMatches().some(({ handle }) => asksForFocus(handle));
  return (
    <AppShell
      person={person}
      workshop={workshop}
      workshops={workshops}
      roleWords={workshop.roles.map((role) => roleTitles[role]).join(", ")}
      navigation={navigationFor(workshop, person.id, counts)}
      flash={flash}
      focus={focus}
    >
      {children}
    </AppShell>
  );
}

/** A route with `export const handle = { focus: true }` gets the whole sheet: no navigation row. */
function asksForFocus(handle: unknown): boolean {
  return typeof handle === "object" && handle !== null && "focus" in handle && handle.focus === true;
}
