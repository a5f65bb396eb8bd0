import { z } from "zod";

/**
 * Of the passwords that appear again and again in published leaks, some that are long enough to get past the length
 * rule (from memory). Length does the work; this only stops the worst.
 */
const common = new Set([
  "123456789012",
  "1234567890123",
  "12345678901234",
  "123456123456",
  "1q2w3e4r5t6y",
  "1qaz2wsx3edc",
  "abcdefghijkl",
  "administrator",
  "changeme1234",
  "iloveyou1234",
  "letmein12345",
  "mainsgate123",
  "password1234",
  "password12345",
  "passwordpassword",
  "p@ssw0rd1234",
  "qwerty123456",
  "qwertyuiop12",
  "qwertyuiop123",
  "qwertyuiopas",
  "welcome12345",
]);

export const PASSWORD_LENGTH = { least: 12, most: 200 } as const;

/** A new password: long enough and not one of the commonest; nothing is demanded of its composition. */
export const newPasswordField = z
  .string({ error: "Choose a password." })
  .min(PASSWORD_LENGTH.least, `Take at least ${PASSWORD_LENGTH.least} characters; a few words are good.`)
  .max(PASSWORD_LENGTH.most, `Take at most ${PASSWORD_LENGTH.most} characters.`)
  .refine((password) => !common.has(password.toLowerCase()) && !/^(.)\1+$/.test(password), {
    error: "This password is one of the first that anybody would try. Take another.",
  });
