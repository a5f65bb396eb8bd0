import { CopyPlus, FilePen, History, ListChecks, PenLine, ScrollText, Zap } from "lucide-react";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { PhotoStrip } from "~/components/photo-strip";
import { PhotoUpload } from "~/components/photo-upload";
import { ConfirmDialog } from "~/components/ui/confirm-dialog";
import { LinkButton } from "~/components/ui/link-button";
import { Sheet } from "~/components/ui/sheet";
import { Time } from "~/components/ui/time";
import { TitleBlock } from "~/components/ui/title-block";
import { authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { readForm } from "~/middleware/read-form.server";
import { discardUnit } from "~/services/units/discard-unit.server";
import { handOverUnit } from "~/services/units/hand-over-unit.server";
import { loadOverview } from "~/services/units/load-overview.server";
import { succeedUnit } from "~/services/units/succeed-unit.server";
import { submitUnit } from "~/services/units/submit-unit.server";
import type { Route } from "./+types/overview";
import { FindingList } from "./finding-list";
import { HandOverPanel } from "./hand-over-panel";
import { MapOverview } from "./map-overview";
import { nextStepFor } from "./next-step";
import { SubmitPanel } from "./submit-panel";
import { unitActionSchema } from "./unit-action.schema";
import { refuse, refuseUnreadable } from "./refusal.server";
import { SentBackNote } from "./sent-back-note";
import { UnitHead } from "./unit-head";
import { VersionNotes } from "./version-notes";

export async function loader({ params, context }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.read", params.unit);
  return { slug: services.workshop.slug, ...(await loadOverview(services, unit)) };
}

export async function action({ request, params, context }: Route.ActionArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.read", params.unit);
  const input = unitActionSchema.safeParse(Object.fromEntries(await readForm(request)));
  if (!input.success) return refuseUnreadable();
  const home = `/w/${services.workshop.slug}/units`;
  const target = { unitNumber: unit.number, expectedVersion: input.data.version };
  try {
    switch (input.data.intent) {
      case "submit":
        await submitUnit(services, target);
        return await redirectWithFlash(
          `${home}/${unit.number}`,
          `Unit ${unit.number} is submitted. The inspectors have been told.`,
        );
      case "discard":
        await discardUnit(services, target);
        return await redirectWithFlash(home, `The draft of unit ${unit.number} is discarded.`);
      case "succeed": {
        const number = await succeedUnit(services, target);
        return await redirectWithFlash(
          `${home}/${number}`,
          `Unit ${number} is begun as the new version of unit ${unit.number}.`,
        );
      }
      case "hand-over": {
        const { name } = await handOverUnit(services, { ...target, toId: input.data.to });
        return await redirectWithFlash(
          `${home}/${unit.number}`,
          `Unit ${unit.number} is now ${name}’s to go on with.`,
        );
      }
    }
  } catch (error) {
    return refuse(error);
  }
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  {
    title: loaderData
      ? `Unit ${loaderData.unit.number}, ${loaderData.unit.name} · Mainsgate`
      : "Unit · Mainsgate",
  },
];

export default function UnitOverview({ loaderData, actionData }: Route.ComponentProps) {
  const { slug, unit, standing, may, map, ruleSet, facts, files, findings, revisions, submission } =
    loaderData;
  const { versions, handOver } = loaderData;
  const sentBack = revisions.at(-1)?.sentBack ?? null;
  const base = `/w/${slug}/units/${unit.number}`;
  const api = `/api/w/${slug}`;
  const conflict = actionData?.conflict ? actionData.message : null;
  return (
    <>
      <UnitHead
        slug={slug}
        number={unit.number}
        name={unit.name}
        state={unit.state}
        standing={standing}
        revision={unit.revision}
        editable={may.edit}
        actions={<Links slug={slug} unit={unit} may={may} />}
      />
      <div className="space-y-5">
        {conflict ? <ConflictNotice message={conflict} reloadHref={base} /> : null}
        <NextStep unit={unit} />
        <VersionNotes slug={slug} {...versions} />
        {unit.state === "sent_back" && sentBack ? (
          <SentBackNote sentBack={sentBack} revision={unit.revision} />
        ) : null}
        {handOver ? <HandOverPanel unit={unit} builder={loaderData.builder} candidates={handOver} /> : null}
        {may.edit ? (
          <SubmitPanel
            base={base}
            unit={unit}
            submission={submission}
            photos={files.filter((file) => file.kind === "photo" && file.subject === "unit").length}
            mayDiscard={may.discard}
            refused={actionData?.reasons ?? null}
          />
        ) : null}
        <TitleBlock items={titleBlock(loaderData)} />
        <MapOverview map={map} ruleSet={ruleSet} facts={facts} base={base} mayEdit={may.edit} />
        <Sheet
          title="Photos and drawings"
          lead="Inside and outside, the plate, the wiring, the earth stud. Drawings as PDF or picture."
        >
          <div className="space-y-4">
            <PhotoStrip
              files={files.filter((file) => file.subject === "unit")}
              api={api}
              unit={unit.number}
              editableRevision={may.edit ? unit.revision : undefined}
              alt={unit.name}
            />
            {files.some((file) => file.subject === "unit") ? null : (
              <p className="text-ink-soft">
                {may.edit ? "None yet. A unit is examined faster when the inspector has seen it." : "None."}
              </p>
            )}
            {may.edit ? (
              <PhotoUpload
                action={`${api}/units/${unit.number}/files`}
                fields={unitFields}
                accept="image/*,application/pdf"
                label="Add photos or drawings"
              />
            ) : null}
          </div>
        </Sheet>
        {findings.length > 0 ? (
          <Sheet title={`Findings (${findings.filter((finding) => !finding.closing).length} open)`} flush>
            <FindingList findings={findings} api={api} unit={unit.number} />
          </Sheet>
        ) : null}
        <Sheet title="Revisions" flush>
          <ol className="divide-y divide-rule">
            {revisions.map((revision) => (
              <li key={revision.id} className="flex flex-wrap gap-x-4 px-4 py-2 text-sm">
                <span className="font-semibold">Revision {revision.number}</span>
                <span>
                  begun <Time at={revision.createdAt} />
                </span>
                <span>
                  {revision.submittedAt ? (
                    <>
                      submitted <Time at={revision.submittedAt} />
                    </>
                  ) : (
                    "being drafted"
                  )}
                </span>
                {revision.sentBack ? (
                  <span className="w-full text-ink-soft">
                    {revision.sentBack.by} had sent revision {revision.number - 1} back:{" "}
                    {revision.sentBack.reason}
                  </span>
                ) : null}
              </li>
            ))}
          </ol>
        </Sheet>
      </div>
    </>
  );
}

const unitFields = { subject: "unit" };

function NextStep({ unit }: { unit: Route.ComponentProps["loaderData"]["unit"] }) {
  const { what, who } = nextStepFor(unit);
  return (
    <p className="border-l-4 border-copper bg-copper-wash px-4 py-3">
      <span className="font-semibold">{what}</span> {who}
    </p>
  );
}

function Links({
  slug,
  unit,
  may,
}: {
  slug: string;
  unit: Route.ComponentProps["loaderData"]["unit"];
  may: Route.ComponentProps["loaderData"]["may"];
}) {
  const home = `/w/${slug}`;
  return (
    <>
      {may.edit ? (
        <LinkButton to={`${home}/units/${unit.number}/map`} icon={Zap}>
          Edit the map
        </LinkButton>
      ) : null}
      {may.edit ? (
        <LinkButton to={`${home}/units/${unit.number}/facts`} icon={FilePen}>
          Edit facts
        </LinkButton>
      ) : null}
      {may.readSheet ? (
        <LinkButton to={`${home}/bench/${unit.number}`} icon={ListChecks}>
          Bench sheet
        </LinkButton>
      ) : null}
      {may.review ? (
        <LinkButton to={`${home}/signing/${unit.number}`} icon={PenLine}>
          Review and sign
        </LinkButton>
      ) : null}
      {may.readRecord ? (
        <LinkButton to={`${home}/archive/${unit.number}`} icon={ScrollText}>
          Record
        </LinkButton>
      ) : null}
      {may.readTrail ? (
        <LinkButton to={`${home}/archive/${unit.number}/trail`} icon={History}>
          Trail
        </LinkButton>
      ) : null}
      {may.succeed ? (
        <ConfirmDialog
          trigger="Start a new version"
          triggerVariant="secondary"
          triggerIcon={CopyPlus}
          title={`Start a new version of unit ${unit.number}?`}
          confirm="Start it"
          confirmVariant="primary"
          fields={{ intent: "succeed", version: String(unit.version) }}
        >
          <p>
            A new unit with the next number begins as a draft, with a copy of the facts and the energy map.
            Photos are not copied: they must show the new version.
          </p>
          {unit.state === "signed" ? (
            <p>
              Unit {unit.number} stays as it is, and in force, until the new version is signed; then it is
              superseded. If you change this unit itself, unplug it and mark it first.
            </p>
          ) : (
            <p>Unit {unit.number} stays as it is and must not be plugged in.</p>
          )}
        </ConfirmDialog>
      ) : null}
    </>
  );
}

function titleBlock({ unit, builder, inspector, facts, ruleSet }: Route.ComponentProps["loaderData"]) {
  const metres = facts.cordLengthM ?? null;
  const square = facts.cordAreaMm2 ?? null;
  return [
    { label: "Purpose", value: unit.purpose, wide: true },
    { label: "Built by", value: builder },
    { label: "Place of use", value: unit.placeOfUse },
    { label: "Supply", value: `${facts.supplyVolts} V, ${facts.supplyHertz} Hz`, numeric: true },
    { label: "Protection class", value: facts.protectionClass },
    {
      label: "Supply cord",
      value: metres === null && square === null ? null : `${metres ?? "?"} m, ${square ?? "?"} mm²`,
      numeric: true,
    },
    {
      label: "Held in the hand",
      value: facts.handheld === null || facts.handheld === undefined ? null : facts.handheld ? "Yes" : "No",
    },
    {
      label: "Height above sea level",
      value: facts.altitudeM === null || facts.altitudeM === undefined ? null : `${facts.altitudeM} m`,
      numeric: true,
    },
    { label: "Inspector", value: inspector ?? "nobody yet" },
    { label: "Judged by", value: ruleSet.title, wide: true },
  ];
}
