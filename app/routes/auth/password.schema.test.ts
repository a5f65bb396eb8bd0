import { expect, test } from "vitest";
import { newPasswordField } from "./password.schema";

const accepted = (password: string) => newPasswordField.safeParse(password).success;

test("length is what counts: 12 to 200 characters of any kind", () => {
  expect(accepted("elevenchars")).toBe(false);
  expect(accepted("twelve chars")).toBe(true);
  expect(accepted("ohne Großbuchstaben, 数字 ✓")).toBe(true);
  expect(accepted("ab".repeat(100))).toBe(true);
  expect(accepted("ab".repeat(100) + "a")).toBe(false);
});

test.each(["passwordpassword", "PASSWORD1234", "aaaaaaaaaaaaaaa", "qwertyuiop12"])(
  "refuses %s",
  (password) => {
    expect(accepted(password)).toBe(false);
  },
);
