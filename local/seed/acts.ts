import type { EnergyMap } from "~/engine/energy-map";
import type { BenchCheck } from "~/engine/bench-check";
import { beforeMains } from "~/services/bench/before-mains";
import { loadSheet } from "~/services/bench/load-sheet.server";
import { recordObservation } from "~/services/bench/record-observation.server";
import type { ServiceContext } from "~/services/context.server";
import { type FileSubject, receiveUpload } from "~/services/files/receive-upload.server";
import { listInstruments } from "~/services/instruments/instruments.server";
import { findUnit, type StandingUnit } from "~/services/unit-act.server";
import { loadRevision } from "~/services/units/load-revision.server";
import { saveMap } from "~/services/units/save-map.server";
import { drawPicture } from "./pictures";

/** A unit of the demo as it stands now. */
export async function unitNow(context: ServiceContext, unitNumber: number): Promise<StandingUnit> {
  const unit = await findUnit(context.db, context.workshop.id, unitNumber);
  if (!unit) throw new Error(`The demo has no unit ${unitNumber}.`);
  return unit;
}

/** Saves a map as the builder's editor would. */
export async function drawMap(context: ServiceContext, unitNumber: number, map: EnergyMap): Promise<void> {
  const unit = await unitNow(context, unitNumber);
  const { mapEdition } = await loadRevision(context.db, unit);
  await saveMap(context, { unitNumber, revision: unit.revision, edition: mapEdition, map });
}

/** Adds a drawn picture as a photo, through the same upload as the browser's. */
export async function addPicture(
  context: ServiceContext,
  unitNumber: number,
  caption: string,
  on: { subject: FileSubject; checkKey?: string; findingId?: number },
): Promise<void> {
  const form = new FormData();
  form.set("subject", on.subject);
  if (on.checkKey !== undefined) form.set("checkKey", on.checkKey);
  if (on.findingId !== undefined) form.set("findingId", String(on.findingId));
  form.set("caption", caption);
  form.set(
    "file",
    new Blob([new Uint8Array(await drawPicture(caption, unitNumber))], { type: "image/jpeg" }),
    "demo-picture.jpg",
  );
  const request = new Request("http://demo.invalid/", { method: "POST", body: form });
  await receiveUpload(context, await unitNow(context, unitNumber), request);
}

/**
 * Works a unit's sheet as its inspector: examinations conform, readings lie well on the good side of their limits,
 * required photos are drawn. A check that the engine fails is answered "does not conform", as looking would show.
 *
 * @param share how much of the sheet is worked, from its top; 1 is all of it
 */
export async function workSheet(context: ServiceContext, unitNumber: number, share = 1): Promise<void> {
  const { lines } = await loadSheet(context, await unitNow(context, unitNumber));
  const instruments = await listInstruments(context);
  for (const { check } of lines.slice(0, Math.ceil(lines.length * share))) {
    await recordObservation(context, {
      unitNumber,
      checkKey: check.key,
      latestId: null,
      answer: answerFor(check, (kind) => {
        const fitting = instruments.find((each) => each.kind === kind);
        if (!fitting) throw new Error(`The demo workshop has no instrument for ${check.title} (${kind}).`);
        return fitting.id;
      }),
      reason: await reasonForMains(context, unitNumber, check),
      note: null,
    });
    if (check.photo === "required") {
      await addPicture(context, unitNumber, check.title, { subject: "check", checkKey: check.key });
    }
  }
}

/** A step with mains on, although a dead check has not passed or a danger is open, needs a reason. */
async function reasonForMains(context: ServiceContext, unitNumber: number, check: BenchCheck) {
  if (!check.energised) return null;
  const { lines, findings } = await loadSheet(context, await unitNow(context, unitNumber));
  return beforeMains(check, lines, findings).length > 0
    ? "Fed through an isolating transformer behind a screen, to see the fault. (Demo)"
    : null;
}

function answerFor(check: BenchCheck, instrumentOf: (kind: string) => number) {
  const { asks } = check;
  if (asks.kind === "examination") {
    return { kind: "examined" as const, conforms: check.computed?.verdict !== "fail" };
  }
  return {
    kind: "measured" as const,
    value: goodReading(asks.limit),
    bound: null,
    unit: asks.unit,
    instrumentId: instrumentOf(asks.instrument.kind),
    conditions: asks.conditions[0] ?? "",
  };
}

/** A made-up reading on the good side: 45 % of a maximum, twice a minimum, the middle of a range. */
function goodReading(limit: Extract<BenchCheck["asks"], { kind: "reading" }>["limit"]): number {
  switch (limit.kind) {
    case "at-most":
      return Number((limit.value * 0.45).toPrecision(3));
    case "at-least":
      return Number((limit.value * 2).toPrecision(3));
    case "between":
      return Number(((limit.lower + limit.upper) / 2).toPrecision(3));
  }
}
