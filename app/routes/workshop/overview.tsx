import { PageHeader } from "~/components/ui/page-header";
import { authorise } from "~/middleware/authorise.server";
import type { Route } from "./+types/overview";

export function loader({ context }: Route.LoaderArgs) {
  const { person, workshop } = authorise(context, "workshop.visit");
  return { name: person.name, workshop: workshop.name };
}

export default function Overview({ loaderData }: Route.ComponentProps) {
  return <PageHeader title={loaderData.workshop} lead={`Signed in as ${loaderData.name}.`} />;
}
