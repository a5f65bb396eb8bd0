// Runs one of the local services as a process of its own, as CHILD_INPUT tells. It says `{ready}` over the
// channel to its parent and ends on SIGTERM, or when the parent is gone.
import { z } from "zod";
import { startMailServer } from "./mail-server";
import { startObjectStore } from "./object-store";

const inputSchema = z.discriminatedUnion("kind", [
  z.object({
    kind: z.literal("object-store"),
    folder: z.string(),
    bucket: z.string(),
    port: z.int(),
    region: z.string(),
    accessKeyId: z.string(),
    secretAccessKey: z.string(),
  }),
  z.object({ kind: z.literal("mail"), folder: z.string(), smtpPort: z.int(), webPort: z.int() }),
]);
export type FakeInput = z.infer<typeof inputSchema>;

const input = inputSchema.parse(JSON.parse(process.env.CHILD_INPUT ?? ""));
const server = await (input.kind === "mail" ? startMailServer(input) : startObjectStore(input));
const end = () => void server.close().then(() => process.exit(0));
process.once("SIGTERM", end);
process.once("disconnect", end);
process.send?.({ ready: true });
