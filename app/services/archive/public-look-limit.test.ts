import { expect, test } from "vitest";
import { ThrottledError } from "~/services/errors";
import { countLook } from "./public-look-limit.server";

const MINUTE = 60_000;

function looks(address: string, count: number, at: number): void {
  for (let look = 0; look < count; look++) countLook(address, at);
}

test("a network may look 120 times a minute, then waits until the minute is over", () => {
  looks("192.0.2.1", 120, 0);
  expect(() => countLook("192.0.2.1", MINUTE - 1)).toThrow(ThrottledError);
  // Others are not in the way of it.
  looks("192.0.2.2", 1, MINUTE - 1);
  looks("192.0.2.1", 120, MINUTE);
  expect(() => countLook("192.0.2.1", MINUTE)).toThrow(ThrottledError);
});

test("the addresses of one IPv6 customer count together", () => {
  looks("2001:db8:1:2::1", 60, 0);
  looks("2001:db8:1:2:ffff::2", 60, 0);
  expect(() => countLook("2001:db8:1:2::3", 0)).toThrow(ThrottledError);
  looks("2001:db8:1:3::1", 1, 0);
});
