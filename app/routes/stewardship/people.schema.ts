import { z } from "zod";
import { roles } from "~/workflow/roles";
import { nameField } from "../auth/name.schema";
import { emailField } from "../auth/sign-in.schema";

const rolesField = z.array(z.enum(roles)).min(1, "Choose at least one role.");

export const inviteSchema = z.object({
  intent: z.literal("invite"),
  name: nameField,
  email: emailField,
  roles: rolesField,
});

const invitation = z.number().int().positive();
const resendSchema = z.object({ intent: z.literal("resend"), invitation });
const cancelSchema = z.object({ intent: z.literal("cancel"), invitation });

export const peopleSchema = z.discriminatedUnion("intent", [inviteSchema, resendSchema, cancelSchema]);

export const rolesSchema = z.object({
  intent: z.literal("roles"),
  /** The roles that the form was made from, so that a change by somebody else meanwhile is noticed. */
  expected: z.string().transform((text, context) => {
    const parsed = z.array(z.enum(roles)).safeParse(text === "" ? [] : text.split(" "));
    if (parsed.success) return parsed.data;
    context.addIssue({ code: "custom", message: "Load the page again." });
    return z.NEVER;
  }),
  roles: z.array(z.enum(roles)).min(1, "Choose at least one role, or remove the person from the workshop."),
});

export const personSchema = z.discriminatedUnion("intent", [
  rolesSchema,
  z.object({ intent: z.literal("remove") }),
]);
