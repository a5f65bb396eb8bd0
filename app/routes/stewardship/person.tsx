import { getFormProps, useForm } from "@conform-to/react";
import { getZodConstraint, parseWithZod } from "@conform-to/zod/v4";
import { data, Form, useNavigation } from "react-router";
import { Breadcrumbs } from "~/components/shell/breadcrumbs";
import { ConflictNotice } from "~/components/shell/conflict-notice";
import { Button } from "~/components/ui/button";
import { ChoiceGroupField } from "~/components/ui/choice-group-field";
import { ConfirmDialog } from "~/components/ui/confirm-dialog";
import { FormErrorSummary } from "~/components/ui/form-error-summary";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { Day, Time } from "~/components/ui/time";
import { TitleBlock } from "~/components/ui/title-block";
import { answerTo, refusal } from "~/middleware/answers.server";
import { authorise } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { dayIn, type ServiceContext } from "~/services/context.server";
import { ServiceError } from "~/services/errors";
import { licencesOf } from "~/services/people/licences.server";
import {
  changeRoles,
  getMember,
  removeMember,
  unitsInHandsOf,
  unitsOnBenchOf,
} from "~/services/people/members.server";
import { licenceInDate } from "~/workflow/licence-fit";
import type { Route } from "./+types/person";
import { roleOptions } from "./invite-form";
import { personSchema, rolesSchema } from "./people.schema";

export async function loader({ context, params }: Route.LoaderArgs) {
  const services = authorise(context, "people.read");
  const member = await memberOr404(services, params.person);
  const today = dayIn(services.workshop.timeZone, services.now());
  const [licences, onBench, inHands] = await Promise.all([
    licencesOf(services.db, services.workshop.id, member.id),
    unitsOnBenchOf(services, member.id),
    unitsInHandsOf(services, member.id),
  ]);
  return {
    member,
    onBench,
    inHands,
    isOneself: member.id === services.person.id,
    licences: licences.map((licence) => ({ ...licence, counts: licenceInDate(licence, today) })),
    slug: services.workshop.slug,
  };
}

async function memberOr404(services: ServiceContext, personId: string) {
  if (!/^\d{1,9}$/.test(personId)) throw refusal(404, "There is no such person in this workshop.");
  try {
    return await getMember(services, Number(personId));
  } catch (error) {
    throw answerTo(error);
  }
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const services = authorise(context, "people.manage");
  const { id, name } = await memberOr404(services, params.person);
  const submission = parseWithZod(await readForm(request), { schema: personSchema });
  if (submission.status !== "success") {
    return data(
      { ...submission.reply(), conflict: null, message: "That could not be read." },
      { status: 400 },
    );
  }
  const { value } = submission;
  const people = `/w/${params.workshop}/people`;
  if (value.intent === "remove") {
    try {
      await removeMember(services, id);
    } catch (error) {
      if (!(error instanceof ServiceError)) throw error;
      return data(
        { ...submission.reply(), conflict: null, message: error.message },
        { status: error.status },
      );
    }
    return redirectWithFlash(
      id === services.person.id ? "/" : people,
      `${name} is no longer in the workshop.`,
    );
  }
  try {
    await changeRoles(services, id, value);
  } catch (error) {
    return refuseForm(error, submission);
  }
  const staysSteward = id !== services.person.id || value.roles.includes("steward");
  return redirectWithFlash(
    staysSteward ? `${people}/${id}` : `/w/${params.workshop}`,
    `The roles of ${name} are changed.`,
  );
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData ? loaderData.member.name : "Person"} · Mainsgate` },
];

export default function Person({ loaderData, actionData }: Route.ComponentProps) {
  const { member, licences, onBench, inHands, isOneself, slug } = loaderData;
  return (
    <>
      <Breadcrumbs items={[{ label: "People", to: `/w/${slug}/people` }, { label: member.name }]} />
      <PageHeader
        title={member.name}
        lead={member.email}
        actions={
          <ConfirmDialog
            trigger={isOneself ? "Leave the workshop" : "Remove from the workshop"}
            title={isOneself ? "Leave this workshop?" : `Remove ${member.name} from this workshop?`}
            confirm={isOneself ? "Leave" : "Remove"}
            fields={{ intent: "remove" }}
          >
            <p>
              From the next page on {isOneself ? "you see" : "they see"} nothing of this workshop. What was
              built, measured and signed stays as it is. An invitation brings {isOneself ? "you" : "them"}{" "}
              back.
            </p>
            {onBench.length > 0 ? (
              <p className="font-semibold">
                {unitList(onBench)} {onBench.length === 1 ? "is" : "are"} on {isOneself ? "your" : "their"}{" "}
                bench and should be put back in the queue first.
              </p>
            ) : null}
            {inHands.length > 0 ? (
              <p className="font-semibold">
                {unitList(inHands)} {inHands.length === 1 ? "waits" : "wait"} for {isOneself ? "you" : "them"}{" "}
                as builder. A steward hands {inHands.length === 1 ? "it" : "them"} to another one on the
                unit’s page afterwards.
              </p>
            ) : null}
          </ConfirmDialog>
        }
      />
      {actionData?.conflict ? (
        <div className="mb-5">
          <ConflictNotice message={actionData.conflict} reloadHref={`/w/${slug}/people/${member.id}`} />
        </div>
      ) : null}
      <div className="grid items-start gap-5 lg:grid-cols-2">
        <RolesForm
          // Made anew when the roles have changed, so that it never shows what is no longer so.
          key={member.roles.join(" ")}
          held={member.roles}
          lastResult={actionData?.initialValue?.intent === "roles" ? actionData : undefined}
        />
        <div className="grid gap-5">
          <TitleBlock
            columns={2}
            items={[
              { label: "In the workshop since", value: <Time at={member.since} style="date" /> },
              { label: "On the bench now", value: onBench.length === 0 ? "Nothing" : unitList(onBench) },
              ...(inHands.length > 0
                ? [{ label: "Waits for them as builder", value: unitList(inHands) }]
                : []),
            ]}
          />
          {licences.length > 0 ? (
            <Sheet title="Licences">
              <ul className="space-y-2">
                {licences.map((licence) => (
                  <li key={licence.id}>
                    <span className="font-semibold">{licence.number}</span>, {licence.authority}:{" "}
                    <Day on={licence.validFrom} /> to <Day on={licence.validTo} />
                    {licence.revoked
                      ? ", revoked"
                      : licence.counts
                        ? ", counts today"
                        : ", does not count today"}
                  </li>
                ))}
              </ul>
            </Sheet>
          ) : null}
        </div>
      </div>
    </>
  );
}

function RolesForm({
  held,
  lastResult,
}: {
  held: Route.ComponentProps["loaderData"]["member"]["roles"];
  lastResult: Route.ComponentProps["actionData"];
}) {
  const busy = useNavigation().formData?.get("intent") === "roles";
  const [form, fields] = useForm({
    id: "roles",
    lastResult,
    defaultValue: { roles: held },
    constraint: getZodConstraint(rolesSchema),
    onValidate: ({ formData }) => parseWithZod(formData, { schema: rolesSchema }),
    shouldRevalidate: "onInput",
  });
  return (
    <Sheet title="Roles">
      <Form method="post" {...getFormProps(form)} className="space-y-4">
        <FormErrorSummary form={form} title="The roles were not changed" labels={{ roles: "Roles" }} />
        <input type="hidden" name="expected" value={held.join(" ")} />
        <ChoiceGroupField field={fields.roles} label="Roles" hideLabel multiple options={roleOptions} />
        <Button variant="primary" name="intent" value="roles" pending={busy} pendingLabel="Saving…">
          Save the roles
        </Button>
      </Form>
    </Sheet>
  );
}

function unitList(numbers: readonly number[]): string {
  return `Unit ${numbers.join(", ")}`;
}
