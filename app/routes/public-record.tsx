import { data } from "react-router";
import { PlainShell } from "~/components/shell/plain-shell";
import { Caution } from "~/components/ui/caution";
import { Day } from "~/components/ui/time";
import { TitleBlock } from "~/components/ui/title-block";
import { clientAddressContext } from "~/context";
import { answerTo } from "~/middleware/answers.server";
import { findPublicRecord } from "~/services/archive/public-record.server";
import { countLook } from "~/services/archive/public-look-limit.server";
import { database } from "~/services/database.server";
import { ServiceError } from "~/services/errors";
import { RecordConditions } from "./archive/record-conditions";
import { ValidityBanner } from "./archive/validity-banner";
import type { Route } from "./+types/public-record";

/** What anybody sees who scans a unit's code; no sign-in, no personal data. */
export async function loader({ params, context }: Route.LoaderArgs) {
  const now = new Date();
  try {
    countLook(context.get(clientAddressContext), now.getTime());
    const record = await findPublicRecord(database(), params.code, now);
    if (!record) throw data("There is no unit behind this code.", { status: 404 });
    return data(record, { headers: { "X-Robots-Tag": "noindex, nofollow", "Cache-Control": "no-store" } });
  } catch (error) {
    if (error instanceof ServiceError) throw answerTo(error);
    throw error;
  }
}

export function headers({ loaderHeaders }: Route.HeadersArgs) {
  return loaderHeaders;
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `Unit ${loaderData.unitNumber}, ${loaderData.unitName}` : "Mainsgate" },
  { name: "robots", content: "noindex, nofollow" },
];

export default function PublicRecordPage({ loaderData: record }: Route.ComponentProps) {
  return (
    <PlainShell>
      <div className="space-y-5">
        <header>
          <p className="legend-text">{record.workshopName}</p>
          <h1 className="text-2xl">
            Unit {record.unitNumber}, {record.unitName}
          </h1>
          {record.demo ? (
            <p className="font-medium text-copper">Demonstration: all data here are invented.</p>
          ) : null}
        </header>
        <ValidityBanner validity={record.validity} departures={record.departures}>
          {"recheckOn" in record.validity ? (
            <p className="mt-1 font-medium">
              Recheck by <Day on={record.validity.recheckOn} />
            </p>
          ) : null}
          {record.withdrawnOn ? (
            <p className="mt-1 font-medium">
              Withdrawn on <Day on={record.withdrawnOn} />
            </p>
          ) : null}
        </ValidityBanner>
        {record.conditions ? (
          <section aria-labelledby="conditions">
            <h2 id="conditions" className="mb-2 text-lg">
              Conditions of use
            </h2>
            <RecordConditions
              conditions={record.conditions}
              recheckOn={"recheckOn" in record.validity ? record.validity.recheckOn : null}
            />
          </section>
        ) : null}
        <TitleBlock
          columns={2}
          items={[
            { label: "Decided on", value: <Day on={record.decidedOn} /> },
            { label: "Kept by", value: record.workshopName },
          ]}
        />
        <Caution sign="voltage" title="Cautions" items={record.cautions} />
      </div>
    </PlainShell>
  );
}
