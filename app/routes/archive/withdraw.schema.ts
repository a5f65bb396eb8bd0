import { z } from "zod";
import { lines, passwordAgain } from "~/engine/typed-text";

export const withdrawSchema = z.object({
  version: z.number("Load the page again.").int("Load the page again.").positive("Load the page again."),
  reason: lines("Say why it is withdrawn, in a sentence.", 4000, 10),
  password: passwordAgain,
});
