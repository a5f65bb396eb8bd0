import { z } from "zod";
import { nameField } from "../auth/name.schema";
import { newPasswordField } from "../auth/password.schema";

export const renameSchema = z.object({ intent: z.literal("rename"), name: nameField });

export const passwordSchema = z.object({
  intent: z.literal("password"),
  current: z.string({ error: "Enter your current password." }).max(200),
  password: newPasswordField,
});

const sessionSchema = z.object({ intent: z.literal("end-session"), session: z.string().length(64) });
const othersSchema = z.object({ intent: z.literal("end-others") });

export const accountSchema = z.discriminatedUnion("intent", [
  renameSchema,
  passwordSchema,
  sessionSchema,
  othersSchema,
]);
