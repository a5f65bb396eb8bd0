import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { data, Form, useNavigation } from "react-router";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { ChoiceGroupField } from "~/components/ui/choice-group-field";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { NumberField } from "~/components/ui/number-field";
import { PageHeader } from "~/components/ui/page-header";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";
import { ruleSets } from "~/engine/rule-set";
import { authorise } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { changeSettings, settingsOf } from "~/services/workshop-settings.server";
import type { Route } from "./+types/settings";
import { RuleSetTable } from "./rule-set-table";
import { settingsSchema } from "./settings.schema";

export function loader({ context }: Route.LoaderArgs) {
  const { workshop } = authorise(context, "workshop.manage");
  return {
    slug: workshop.slug,
    settings: settingsOf(workshop),
    timeZones: [...new Set([workshop.timeZone, "UTC", ...Intl.supportedValuesOf("timeZone")])].sort(),
  };
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const services = authorise(context, "workshop.manage");
  const submission = parseWithZod(await readForm(request), { schema: settingsSchema });
  if (submission.status !== "success")
    return data({ ...submission.reply(), conflict: null }, { status: 400 });
  const { seen, ruleSet, ...rest } = submission.value;
  try {
    await changeSettings(services, { expected: seen, settings: { ...rest, ...ruleSet } });
    return await redirectWithFlash(`/w/${params.workshop}/settings`, "The settings are saved.");
  } catch (error) {
    return refuseForm(error, submission);
  }
}

export const meta: Route.MetaFunction = () => [{ title: "Settings · Mainsgate" }];

export default function Settings({ loaderData, actionData }: Route.ComponentProps) {
  const { slug, settings } = loaderData;
  const inUse = ruleSets.find(
    ({ key, version }) => key === settings.ruleSetKey && version === settings.ruleSetVersion,
  );
  return (
    <>
      <PageHeader title="Settings" lead="How this workshop judges and shows what it does." />
      {actionData?.conflict ? (
        <div className="mb-5">
          <ConflictNotice message={actionData.conflict} reloadHref={`/w/${slug}/settings`} />
        </div>
      ) : null}
      <div className="grid gap-5">
        <SettingsForm
          // Made anew when the settings have changed, so that it never shows what is no longer so.
          key={JSON.stringify(settings)}
          {...loaderData}
          lastResult={actionData}
        />
        {inUse ? (
          <RuleSetTable ruleSet={inUse} />
        ) : (
          <p role="alert" className="font-semibold text-fail">
            This version does not know the rule set {settings.ruleSetKey}, version {settings.ruleSetVersion}.
            Choose another one before anything is submitted.
          </p>
        )}
      </div>
    </>
  );
}

function SettingsForm({
  settings,
  timeZones,
  lastResult,
}: Pick<Route.ComponentProps["loaderData"], "settings" | "timeZones"> & {
  lastResult: Route.ComponentProps["actionData"];
}) {
  const busy = useNavigation().formMethod === "POST";
  const [form, fields] = useForm({
    id: "settings",
    lastResult,
    defaultValue: { ...settings, ruleSet: `${settings.ruleSetKey}@${settings.ruleSetVersion}` },
    constraint: getZodConstraint(settingsSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: settingsSchema }),
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet>
      <Form method="post" {...getFormProps(form)} className="max-w-2xl space-y-5">
        <FormErrorSummary form={form} labels={labels} />
        <input type="hidden" name="seen" value={JSON.stringify(settings)} />
        <InputField field={fields.name} label={labels.name} autoComplete="off" />
        <SelectField
          field={fields.timeZone}
          label={labels.timeZone}
          hint="Dates and times are shown in it, and it says when a day begins for licences and calibrations."
          options={timeZones.map((zone) => ({ value: zone, label: zone.replaceAll("_", " ") }))}
        />
        <ChoiceGroupField
          field={fields.ruleSet}
          label={labels.ruleSet}
          hint="Units that were submitted already keep the rule set they were submitted under."
          options={ruleSets.map((one) => ({
            value: `${one.key}@${one.version}`,
            label: one.title,
            hint: `${one.region}, version ${one.version}`,
          }))}
        />
        <ChoiceGroupField
          field={fields.accuracyPolicy}
          label={labels.accuracyPolicy}
          options={[
            {
              value: "rect",
              label: "As a rectangular distribution",
              hint: "U = 2a/√3, where a is the accuracy on the data sheet (JCGM 100). The stricter one.",
            },
            {
              value: "maker-k2",
              label: "As the maker’s expanded uncertainty",
              hint: "U = a. Only where the maker states its accuracy with k = 2.",
            },
          ]}
        />
        <NumberField
          field={fields.recheckMonths}
          label={labels.recheckMonths}
          unit="months"
          hint="What the signing page proposes; the signer decides."
          inputMode="numeric"
        />
        <Button variant="primary" pending={busy} pendingLabel="Saving…">
          Save the settings
        </Button>
      </Form>
    </Sheet>
  );
}

const labels = {
  name: "Name of the workshop",
  timeZone: "Time zone",
  ruleSet: "Rule set",
  accuracyPolicy: "How an instrument’s accuracy becomes an uncertainty",
  recheckMonths: "Recheck after",
  seen: "Settings",
};
