import { z } from "zod";

export const emailField = z
  .string({ error: "Enter your mail address." })
  .trim()
  .toLowerCase()
  .max(254, "That is too long for a mail address.")
  .pipe(z.email("That is no mail address, such as ada@workshop.example."));

export const signInSchema = z.object({
  email: emailField,
  password: z.string({ error: "Enter your password." }).max(200, "Passwords have at most 200 characters."),
});
