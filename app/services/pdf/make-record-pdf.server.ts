import type { Database } from "~/db/client.server";

/**
 * Makes the PDF of a record and stores it, once. The job's row keeps it due until this has succeeded.
 *
 * @param recordId id of the row in `records`
 */
export async function makeRecordPdf(_db: Database, recordId: number, _now: () => Date): Promise<void> {
  throw new Error(`The PDF of record ${recordId} can't be made yet.`);
}
