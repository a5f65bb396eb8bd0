import { parseWithZod } from "@conform-to/zod/v4";
import { data, useParams } from "react-router";
import { Badge } from "~/components/ui/badge";
import { ConfirmDialog } from "~/components/ui/confirm-dialog";
import { type Column, DataTable } from "~/components/ui/data-table";
import { EmptyState } from "~/components/ui/empty-state";
import { PageHeader } from "~/components/ui/page-header";
import { Sheet } from "~/components/ui/sheet";
import { Day } from "~/components/ui/time";
import { authorise } from "~/middleware/authorise.server";
import { redirectWithFlash } from "~/middleware/flash.server";
import { refuseForm } from "~/middleware/form-refusal.server";
import { readForm } from "~/middleware/read-form.server";
import { dayIn } from "~/services/context.server";
import { ServiceError } from "~/services/errors";
import { addLicence, listElectricians, listLicences, revokeLicence } from "~/services/people/licences.server";
import { licenceInDate } from "~/workflow/licence-fit";
import type { Route } from "./+types/licences";
import { LicenceForm } from "./licence-form";
import { addLicenceSchema, revokeLicenceSchema } from "./licence.schema";

export async function loader({ context }: Route.LoaderArgs) {
  const services = authorise(context, "licences.manage");
  const [licences, electricians] = await Promise.all([listLicences(services), listElectricians(services)]);
  const today = dayIn(services.workshop.timeZone, services.now());
  return {
    electricians,
    licences: licences.map((licence) => ({ ...licence, standing: standingOf(licence, today) })),
  };
}

type Standing = "counts" | "revoked" | "not-yet" | "lapsed";

function standingOf(licence: Awaited<ReturnType<typeof listLicences>>[number], today: string): Standing {
  if (licence.revoked) return "revoked";
  if (licenceInDate(licence, today)) return "counts";
  return today < licence.validFrom ? "not-yet" : "lapsed";
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const services = authorise(context, "licences.manage");
  const form = await readForm(request);
  const here = `/w/${params.workshop}/licences`;
  if (form.get("intent") === "revoke") {
    const submission = parseWithZod(form, { schema: revokeLicenceSchema });
    if (submission.status !== "success") {
      return data(
        { ...submission.reply(), conflict: null, message: "That could not be read." },
        { status: 400 },
      );
    }
    try {
      await revokeLicence(services, submission.value.licence);
    } catch (error) {
      if (!(error instanceof ServiceError)) throw error;
      return data(
        { ...submission.reply(), conflict: null, message: error.message },
        { status: error.status },
      );
    }
    return redirectWithFlash(here, "The licence is revoked. Nothing can be signed under it any more.");
  }
  const submission = parseWithZod(form, { schema: addLicenceSchema });
  if (submission.status !== "success")
    return data({ ...submission.reply(), conflict: null }, { status: 400 });
  try {
    const { intent: _, ...licence } = submission.value;
    await addLicence(services, licence);
  } catch (error) {
    return refuseForm(error, submission);
  }
  return redirectWithFlash(here, "The licence is recorded.");
}

export const meta: Route.MetaFunction = () => [{ title: "Licences · Mainsgate" }];

export default function Licences({ loaderData, actionData }: Route.ComponentProps) {
  const { workshop } = useParams();
  const { licences, electricians } = loaderData;
  const adding = actionData?.initialValue?.intent === "add" ? actionData : undefined;
  return (
    <>
      <PageHeader
        title="Licences"
        lead="Who may sign what, and until when. Look at the original before you record one: Mainsgate checks dates and scope, not whether it is genuine."
      />
      <div className="grid items-start gap-5 lg:grid-cols-[minmax(0,2fr)_minmax(18rem,1fr)]">
        <Sheet flush title="Recorded">
          <DataTable
            caption="Licences"
            rows={licences}
            rowKey={(licence) => String(licence.id)}
            columns={columns}
            empty={
              <EmptyState title="No licence is recorded">
                Without one, nobody can sign in this workshop.
              </EmptyState>
            }
          />
        </Sheet>
        <LicenceForm
          // Empty again after a licence was added.
          key={licences.length}
          electricians={electricians}
          peopleHref={`/w/${workshop}/people`}
          lastResult={adding}
        />
      </div>
    </>
  );
}

type LicenceRow = Route.ComponentProps["loaderData"]["licences"][number];

const standings: Record<Standing, { word: string; tone: "pass" | "fail" | "idle" }> = {
  counts: { word: "Counts today", tone: "pass" },
  revoked: { word: "Revoked", tone: "fail" },
  lapsed: { word: "Lapsed", tone: "fail" },
  "not-yet": { word: "Not yet", tone: "idle" },
};

const columns: Column<LicenceRow>[] = [
  {
    id: "holder",
    header: "Holder",
    primary: true,
    cell: (row) =>
      row.account === row.holderName ? row.holderName : `${row.holderName} (${row.account} here)`,
  },
  { id: "number", header: "Number", cell: (row) => `${row.number}, ${row.authority}` },
  {
    id: "dates",
    header: "From, to",
    cell: (row) => (
      <>
        <Day on={row.validFrom} /> – <Day on={row.validTo} />
      </>
    ),
  },
  {
    id: "scope",
    header: "Scope",
    cell: (row) => `Up to ${row.maxSupplyVolts} V, ${row.coversBatteries ? "with" : "no"} batteries`,
  },
  {
    id: "standing",
    header: "Today",
    cell: (row) => <Badge tone={standings[row.standing].tone}>{standings[row.standing].word}</Badge>,
  },
  {
    id: "revoke",
    header: "Revoke",
    hideHeader: true,
    cell: (row) =>
      row.revoked ? null : (
        <ConfirmDialog
          trigger={
            <>
              Revoke<span className="sr-only"> licence {row.number}</span>
            </>
          }
          triggerVariant="quiet"
          title={`Revoke licence ${row.number}?`}
          confirm="Revoke"
          fields={{ intent: "revoke", licence: String(row.id) }}
        >
          <p>
            {row.holderName} can sign nothing under it any more. What was signed stays signed. A renewed
            licence is recorded as a new one.
          </p>
        </ConfirmDialog>
      ),
  },
];
