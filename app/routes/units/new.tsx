import { parseWithZod } from "@conform-to/zod/v4";
import { data } from "react-router";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { authorise } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { readForm } from "~/middleware/read-form.server";
import { createUnit } from "~/services/units/create-unit.server";
import type { Route } from "./+types/new";
import { UnitForm } from "./unit-form";
import { unitFormSchema } from "./unit-form.schema";

export function loader({ context }: Route.LoaderArgs) {
  const { workshop } = authorise(context, "unit.create");
  return { home: `/w/${workshop.slug}/units` };
}

export async function action({ request, context }: Route.ActionArgs) {
  const services = authorise(context, "unit.create");
  const submission = parseWithZod(await readForm(request), { schema: unitFormSchema });
  if (submission.status !== "success") return data(submission.reply(), { status: 400 });
  const number = await createUnit(services, submission.value);
  return redirectWithFlash(
    `/w/${services.workshop.slug}/units/${number}/map`,
    `Unit ${number} is made. Now describe its energy map.`,
  );
}

export const meta: Route.MetaFunction = () => [{ title: "New unit · Mainsgate" }];

export default function NewUnit({ loaderData, actionData }: Route.ComponentProps) {
  return (
    <>
      <Breadcrumbs items={[{ label: "Units", to: loaderData.home }, { label: "New unit" }]} />
      <PageHeader title="New unit" lead="Say what you built. Its energy map comes next." />
      <div className="max-w-3xl">
        <UnitForm
          lastResult={actionData}
          submit="Make the unit"
          cancel={
            <LinkButton to={loaderData.home} variant="quiet">
              Cancel
            </LinkButton>
          }
        />
      </div>
    </>
  );
}
