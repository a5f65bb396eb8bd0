import { parseWithZod } from "@conform-to/zod/v4";
import { data, Form } from "react-router";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { Badge } from "~/components/ui/badge";
import { Button } from "~/components/ui/button";
import { ConfirmDialog } from "~/components/ui/confirm-dialog";
import { PageHeader } from "~/components/ui/page-header";
import { Day } from "~/components/ui/time";
import { TitleBlock } from "~/components/ui/title-block";
import { answerTo, refusal } from "~/middleware/answers.server";
import { authorise } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { dayIn, type ServiceContext } from "~/services/context.server";
import {
  addRange,
  getInstrument,
  recalibrate,
  removeRange,
  setRetired,
} from "~/services/instruments/instruments.server";
import { calibrationState } from "~/workflow/calibration";
import { decide } from "~/workflow/permissions";
import type { Route } from "./+types/instrument";
import { instrumentActionSchema } from "./instrument.schema";
import { calibrationWords, instrumentKindTitles } from "./instrument-words";
import { RangeForm } from "./range-form";
import { RangeTable } from "./range-table";
import { RecalibrateForm } from "./recalibrate-form";

export async function loader({ context, params }: Route.LoaderArgs) {
  const services = authorise(context, "instruments.read");
  const { workshop, person } = services;
  const instrument = await instrumentOr404(services, params.instrument);
  const today = dayIn(workshop.timeZone, services.now());
  return {
    slug: workshop.slug,
    instrument,
    state: calibrationState(instrument, today),
    mayManage: decide("instruments.manage", { id: person.id, roles: workshop.roles }).allowed,
  };
}

async function instrumentOr404(services: ServiceContext, id: string) {
  if (!/^\d{1,9}$/.test(id)) throw refusal(404, "There is no such instrument in this workshop.");
  try {
    return await getInstrument(services, Number(id));
  } catch (error) {
    throw answerTo(error);
  }
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const services = authorise(context, "instruments.manage");
  const { id } = await instrumentOr404(services, params.instrument);
  const submission = parseWithZod(await readForm(request), { schema: instrumentActionSchema });
  if (submission.status !== "success")
    return data({ ...submission.reply(), conflict: null }, { status: 400 });
  const { value } = submission;
  const done = (text: string) => redirectWithFlash(`/w/${params.workshop}/instruments/${id}`, text);
  try {
    switch (value.intent) {
      case "recalibrate": {
        const { intent: _, ...calibration } = value;
        await recalibrate(services, id, calibration);
        return await done(
          "The calibration is recorded. Earlier readings keep the one under which they were taken.",
        );
      }
      case "add-range": {
        const { intent: _, ...range } = value;
        await addRange(services, id, range);
        return await done("The range is added.");
      }
      case "remove-range":
        await removeRange(services, id, value.range);
        return await done(
          "The range is removed. Earlier readings keep the accuracy with which they were judged.",
        );
      case "retire":
        await setRetired(services, id, true);
        return await done("The instrument is retired.");
      case "take-back":
        await setRetired(services, id, false);
        return await done("The instrument is back in use.");
    }
  } catch (error) {
    return refuseForm(error, submission);
  }
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData ? loaderData.instrument.name : "Instrument"} · Mainsgate` },
];

export default function Instrument({ loaderData, actionData }: Route.ComponentProps) {
  const { slug, instrument, state, mayManage } = loaderData;
  const { word, tone } = calibrationWords[state];
  const canChange = mayManage && !instrument.retired;
  const intent = actionData?.initialValue?.intent;
  return (
    <>
      <Breadcrumbs
        items={[{ label: "Instruments", to: `/w/${slug}/instruments` }, { label: instrument.name }]}
      />
      <PageHeader
        title={instrument.name}
        badges={<Badge tone={tone}>{word}</Badge>}
        lead={instrumentKindTitles[instrument.kind]}
        actions={mayManage ? <RetireButton name={instrument.name} retired={instrument.retired} /> : null}
      />
      <div className="grid gap-5">
        <TitleBlock
          items={[
            { label: "Serial number", value: instrument.serial },
            { label: "Calibrated on", value: <Day on={instrument.calibratedOn} /> },
            { label: "Counts until", value: <Day on={instrument.calibrationDue} /> },
            { label: "Certificate", value: instrument.certificate },
          ]}
        />
        <RangeTable ranges={instrument.ranges} canChange={canChange} />
        {canChange ? (
          <div className="grid items-start gap-5 lg:grid-cols-2">
            <RangeForm
              key={`range ${instrument.ranges.length}`}
              lastResult={intent === "add-range" ? actionData : undefined}
            />
            <RecalibrateForm
              key={`calibration ${instrument.calibratedOn} ${instrument.certificate}`}
              lastResult={intent === "recalibrate" ? actionData : undefined}
            />
          </div>
        ) : null}
      </div>
    </>
  );
}

function RetireButton({ name, retired }: { name: string; retired: boolean }) {
  if (retired) {
    return (
      <Form method="post">
        <Button name="intent" value="take-back">
          Take back into use
        </Button>
      </Form>
    );
  }
  return (
    <ConfirmDialog trigger="Retire" title={`Retire ${name}?`} confirm="Retire" fields={{ intent: "retire" }}>
      <p>No new reading can be taken with it. Its earlier readings stay as they are.</p>
    </ConfirmDialog>
  );
}
