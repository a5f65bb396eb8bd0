import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { data, Form, useNavigation, useParams } from "react-router";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { Button } from "~/components/ui/button";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";
import { instrumentKinds } from "~/engine/bench-check";
import { authorise } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { addInstrument } from "~/services/instruments/instruments.server";
import type { Route } from "./+types/instrument-new";
import { addInstrumentSchema } from "./instrument.schema";
import { instrumentKindTitles } from "./instrument-words";

export function loader({ context }: Route.LoaderArgs) {
  authorise(context, "instruments.manage");
  return null;
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const services = authorise(context, "instruments.manage");
  const submission = parseWithZod(await readForm(request), { schema: addInstrumentSchema });
  if (submission.status !== "success")
    return data({ ...submission.reply(), conflict: null }, { status: 400 });
  try {
    const id = await addInstrument(services, submission.value);
    const there = `/w/${params.workshop}/instruments/${id}`;
    return await redirectWithFlash(there, "The instrument is added. State its ranges and accuracy next.");
  } catch (error) {
    return refuseForm(error, submission);
  }
}

export const meta: Route.MetaFunction = () => [{ title: "New instrument · Mainsgate" }];

export default function NewInstrument({ actionData }: Route.ComponentProps) {
  const { workshop } = useParams();
  const list = `/w/${workshop}/instruments`;
  const busy = useNavigation().formMethod === "POST";
  const [form, fields] = useForm({
    id: "instrument",
    lastResult: actionData,
    constraint: getZodConstraint(addInstrumentSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: addInstrumentSchema }),
    shouldRevalidate: "onInput",
  });
  return (
    <>
      <Breadcrumbs items={[{ label: "Instruments", to: list }, { label: "New" }]} />
      <PageHeader title="Add an instrument" />
      <Sheet className="max-w-2xl">
        <Form method="post" {...getFormProps(form)} className="space-y-4">
          <FormErrorSummary form={form} labels={labels} />
          <InputField field={fields.name} label={labels.name} autoComplete="off" />
          <div className="grid gap-4 sm:grid-cols-2">
            <SelectField
              field={fields.kind}
              label={labels.kind}
              placeholder="Choose"
              options={instrumentKinds.map((kind) => ({ value: kind, label: instrumentKindTitles[kind] }))}
            />
            <InputField field={fields.serial} label={labels.serial} autoComplete="off" />
            <InputField field={fields.calibratedOn} label={labels.calibratedOn} type="date" />
            <InputField field={fields.calibrationDue} label={labels.calibrationDue} type="date" />
          </div>
          <InputField field={fields.certificate} label={labels.certificate} autoComplete="off" />
          <div className="flex flex-wrap gap-2">
            <Button variant="primary" pending={busy} pendingLabel="Saving…">
              Add the instrument
            </Button>
            <LinkButton to={list}>Cancel</LinkButton>
          </div>
        </Form>
      </Sheet>
    </>
  );
}

const labels = {
  name: "Name",
  kind: "Kind",
  serial: "Serial number",
  calibratedOn: "Calibrated on",
  calibrationDue: "Counts until",
  certificate: "Certificate",
};
