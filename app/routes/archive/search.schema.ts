import { z } from "zod";
import { recordStates } from "~/services/archive/search-records.server";

const personId = z.coerce.number().int().positive().nullable().catch(null);
const day = z.iso.date().nullable().catch(null);

/** Filters of the archive, as they stand in the address; anything unknown is no filter. */
const archiveParamsSchema = z.object({
  q: z.string().trim().max(100).catch(""),
  state: z.enum(recordStates).nullable().catch(null),
  builder: personId,
  signer: personId,
  from: day,
  to: day,
});

export type ArchiveParams = z.infer<typeof archiveParamsSchema>;

export function readArchiveParams(search: URLSearchParams): ArchiveParams {
  // An empty choice of a form is no choice.
  const given = (name: string) => search.get(name) || null;
  return archiveParamsSchema.parse({
    q: search.get("q") ?? "",
    state: given("state"),
    builder: given("builder"),
    signer: given("signer"),
    from: given("from"),
    to: given("to"),
  });
}
