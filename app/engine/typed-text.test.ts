import { expect, test } from "vitest";
import { lines, oneLine, perhapsOneLine, toOneLine } from "./typed-text";

test("a one-line text holds no breaks, controls or marks that turn the direction", () => {
  expect(toOneLine("Ada\r\nLovelace\u2028B\tC")).toBe("Ada Lovelace B C");
  expect(toOneLine("gnp.\u202Eexe\u202C \u2066x\u2069\u0000\u007F\u0085y")).toBe("gnp.exe x y");
  expect(toOneLine("عمر خالد – Łódź 電源")).toBe("عمر خالد – Łódź 電源");
});

test("a text of several lines keeps its lines alone", () => {
  expect(lines("Say why.", 100).parse("one\r\ntwo\t3\u0007\u202Efour")).toBe("one\r\ntwo\t3four");
});

test("what is missing and what is too long are told apart, in words", () => {
  const name = oneLine("Enter a name.", 5);
  const told = (value: unknown) => name.safeParse(value).error?.issues.map(({ message }) => message);
  expect(told(undefined)).toEqual(["Enter a name."]);
  expect(told(" \u202E\n")).toEqual(["Enter a name."]);
  expect(told("abcdef")).toEqual(["At most 5 characters."]);
  expect(name.parse(" ab\ncd ")).toBe("ab cd");
  expect(perhapsOneLine(3).parse(" \n")).toBe("");
});
