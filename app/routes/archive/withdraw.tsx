import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { Ban } from "lucide-react";
import { data, Form, useNavigation } from "react-router";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { Caution } from "~/components/ui/caution";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { InputField } from "~/components/ui/input-field";
import { LinkButton } from "~/components/ui/link-button";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { TextareaField } from "~/components/ui/textarea-field";
import { useKeptForm } from "~/components/use-kept-form";
import { clientAddressContext } from "~/context";
import { authoriseUnit } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { withdrawUnit } from "~/services/archive/withdraw-unit.server";
import { AuthenticationError, InvalidInputError } from "~/services/errors";
import type { Route } from "./+types/withdraw";
import { withdrawSchema } from "./withdraw.schema";

export async function loader({ context, params }: Route.LoaderArgs) {
  const { unit } = await authoriseUnit(context, "record.withdraw", params.unit);
  return { unit: { number: unit.number, name: unit.name, version: unit.version } };
}

const hideFields = ["password"];

export async function action({ request, context, params }: Route.ActionArgs) {
  // Not by the unit's state: the second of two clicks comes when it is withdrawn already.
  const { services, unit } = await authoriseUnit(context, "signing.decide", params.unit);
  const submission = parseWithZod(await readForm(request), { schema: withdrawSchema });
  if (submission.status !== "success") {
    return data({ ...submission.reply({ hideFields }), conflict: null }, { status: 400 });
  }
  const { version, reason, password } = submission.value;
  try {
    await withdrawUnit(services, {
      unitNumber: unit.number,
      expectedVersion: version,
      reason,
      password,
      address: context.get(clientAddressContext),
    });
  } catch (error) {
    const told =
      error instanceof AuthenticationError ? new InvalidInputError("password", error.message) : error;
    return refuseForm(told, { reply: (options) => submission.reply({ ...options, hideFields }) });
  }
  return redirectWithFlash(
    `/w/${params.workshop}/archive/${unit.number}`,
    `The signature on unit ${unit.number} is withdrawn. Builder, inspector and electricians have been told.`,
  );
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `Withdraw unit ${loaderData.unit.number} · Mainsgate` : "Withdraw · Mainsgate" },
];

/** What this tab keeps until the form was taken. */
const keptFields = ["reason"];

export default function Withdraw({ loaderData, actionData, params }: Route.ComponentProps) {
  const { unit } = loaderData;
  const archive = `/w/${params.workshop}/archive`;
  const pending = useNavigation().formMethod === "POST";
  const kept = useKeptForm("withdraw", keptFields);
  const [form, fields] = useForm({
    id: "withdraw",
    lastResult: actionData,
    constraint: getZodConstraint(withdrawSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: withdrawSchema }),
    shouldValidate: "onSubmit",
    shouldRevalidate: "onInput",
  });
  return (
    <>
      <Breadcrumbs
        items={[
          { label: "Archive", to: archive },
          { label: `Unit ${unit.number}`, to: `${archive}/${unit.number}` },
          { label: "Withdraw" },
        ]}
      />
      <PageHeader
        kicker={`Unit ${unit.number}`}
        title={
          <>
            Withdraw the signature on <bdi>{unit.name}</bdi>
          </>
        }
      />
      <Sheet>
        <Form method="post" {...getFormProps(form)} ref={kept.ref} className="max-w-2xl space-y-5">
          {actionData?.conflict ? (
            <ConflictNotice message={actionData.conflict} reloadHref={`${archive}/${unit.number}`} />
          ) : null}
          {kept.notice}
          <FormErrorSummary
            form={form}
            labels={{ reason: "Reason", password: "Password" }}
            title="It was not withdrawn"
          />
          <Caution title="This can’t be taken back">
            From this moment the unit’s code tells everybody that it must not be plugged in. The record stays
            as it is. To go on, its builder starts a new version of the unit, which is examined and signed in
            its own right.
          </Caution>
          <input type="hidden" name="version" value={unit.version} />
          <TextareaField field={fields.reason} label="Why it is withdrawn" rows={4} />
          <InputField
            field={fields.password}
            label="Your password, again"
            type="password"
            autoComplete="current-password"
            className="max-w-md"
          />
          <div className="flex flex-wrap gap-3">
            <Button variant="danger" icon={Ban} pending={pending} pendingLabel="Withdrawing…">
              Withdraw the signature
            </Button>
            <LinkButton to={`${archive}/${unit.number}`} variant="quiet">
              Leave it in force
            </LinkButton>
          </div>
        </Form>
      </Sheet>
    </>
  );
}
