import { z } from "zod";
import { perhapsOneLine } from "~/engine/typed-text";
import { problem, problemResponse } from "~/middleware/answers.server";
import { authoriseUnit } from "~/middleware/authorise.server";
import { readForm } from "~/middleware/read-form.server";
import { ServiceError } from "~/services/errors";
import { changeFile } from "~/services/files/change-file.server";
import { listFiles } from "~/services/files/list-files.server";
import { receiveUpload } from "~/services/files/receive-upload.server";
import type { Route } from "./+types/unit-files";

const changeSchema = z.discriminatedUnion("intent", [
  z.object({
    intent: z.literal("caption"),
    fileId: z.coerce.number().int().positive(),
    caption: perhapsOneLine(300),
  }),
  z.object({ intent: z.literal("remove"), fileId: z.coerce.number().int().positive() }),
  z.object({ intent: z.literal("restore"), fileId: z.coerce.number().int().positive() }),
]);

/** The one thing of a change that a person types. */
function captionTooLong(error: z.ZodError): string | undefined {
  return error.issues.find((issue) => issue.path[0] === "caption" && issue.code === "too_big")?.message;
}

/** GET: the unit's files. */
export async function loader({ params, context }: Route.LoaderArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.read", params.unit);
  return Response.json({ files: await listFiles(services.db, unit.id) });
}

/**
 * POST multipart/form-data: adds one file (201). POST with `intent` and `fileId`: names it, takes it back or brings it
 * back. Who may is asked by what the file belongs to: see receiveUpload and changeFile.
 */
export async function action({ request, params, context }: Route.ActionArgs) {
  const { services, unit } = await authoriseUnit(context, "unit.read", params.unit);
  try {
    if (request.headers.get("Content-Type")?.startsWith("multipart/")) {
      return Response.json(await receiveUpload(services, unit, request), { status: 201 });
    }
    const change = changeSchema.safeParse(Object.fromEntries(await readForm(request)));
    if (!change.success)
      return problemResponse(400, captionTooLong(change.error) ?? "Say what is to be done with which file.");
    await changeFile(services, unit, change.data);
    return Response.json({ ok: true });
  } catch (error) {
    if (error instanceof ServiceError) return problem(error);
    throw error;
  }
}
