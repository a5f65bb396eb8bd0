import { parseWithZod } from "@conform-to/zod/v4";
import { data } from "react-router";
import { z } from "zod";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { LinkButton } from "~/components/ui/link-button";
import { answerTo } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { readForm } from "~/middleware/read-form.server";
import { ConflictError } from "~/services/errors";
import { editDetails } from "~/services/units/edit-details.server";
import type { UnitRow } from "~/services/unit-act.server";
import type { Route } from "./+types/facts";
import { UnitForm } from "./unit-form";
import { unitFormSchema } from "./unit-form.schema";
import { UnitHead } from "./unit-head";

const editSchema = unitFormSchema.extend({ version: z.coerce.number().int() });

export async function loader({ params, context }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.edit", params.unit);
  const { slug } = services.workshop;
  return {
    base: `/w/${slug}/units/${unit.number}`,
    head: {
      slug,
      number: unit.number,
      name: unit.name,
      state: unit.state,
      standing: null,
      revision: unit.revision,
      editable: true,
    },
    version: unit.version,
    initial: initialOf(unit),
  };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.edit", params.unit);
  const submission = parseWithZod(await readForm(request), { schema: editSchema });
  if (submission.status !== "success") {
    return data({ conflict: null, result: submission.reply() }, { status: 400 });
  }
  const { version, ...details } = submission.value;
  try {
    await editDetails(services, { unitNumber: unit.number, expectedVersion: version, details });
  } catch (error) {
    if (!(error instanceof ConflictError)) throw answerTo(error);
    return data({ conflict: error.message, result: submission.reply() }, { status: 409 });
  }
  return redirectWithFlash(
    `/w/${services.workshop.slug}/units/${unit.number}`,
    "The unit’s facts are saved.",
  );
}

export const meta: Route.MetaFunction = ({ params }) => [
  { title: `Facts of unit ${params.unit} · Mainsgate` },
];

export default function EditFacts({ loaderData, actionData }: Route.ComponentProps) {
  const { base, head, version, initial } = loaderData;
  return (
    <>
      <UnitHead {...head} here="Facts" />
      <div className="max-w-3xl space-y-5">
        {actionData?.conflict ? (
          <ConflictNotice message={actionData.conflict} reloadHref={`${base}/facts`} />
        ) : null}
        <UnitForm
          lastResult={actionData?.result}
          initial={initial}
          version={version}
          submit="Save"
          cancel={
            <LinkButton to={base} variant="quiet">
              Cancel
            </LinkButton>
          }
        />
      </div>
    </>
  );
}

function initialOf(unit: UnitRow): z.input<typeof unitFormSchema> {
  const shown = (value: number | null) => (value === null ? "" : String(value));
  return {
    name: unit.name,
    purpose: unit.purpose,
    placeOfUse: unit.placeOfUse,
    supplyVolts: String(unit.supplyVolts),
    supplyHertz: String(unit.supplyHertz),
    protectionClass: unit.protectionClass,
    cordLengthM: shown(unit.cordLengthM),
    cordAreaMm2: shown(unit.cordAreaMm2),
    altitudeM: shown(unit.altitudeM),
    handheld: unit.handheld === null ? "unknown" : unit.handheld ? "yes" : "no",
  };
}
