import { describe, expect, test } from "vitest";
import { readPage, readSort, sortHref, withParams } from "./table-params";

const params = (search: string) => new URLSearchParams(search);

describe("sortHref", () => {
  test("keeps the filters and drops the place in the old order", () => {
    const href = sortHref(params("q=fuse&state=draft&page=3&after=abc"), "name", null);
    expect(Object.fromEntries(params(href))).toEqual({ q: "fuse", state: "draft", sort: "name", dir: "asc" });
  });

  test("turns the order round at the second click, and back at the third", () => {
    expect(params(sortHref(params(""), "name", { by: "name", direction: "asc" })).get("dir")).toBe("desc");
    expect(params(sortHref(params(""), "name", { by: "name", direction: "desc" })).get("dir")).toBe("asc");
  });

  test("starts a column of dates with the newest where the table says so", () => {
    expect(params(sortHref(params(""), "at", { by: "name", direction: "desc" }, true)).get("dir")).toBe(
      "desc",
    );
    expect(params(sortHref(params(""), "at", { by: "at", direction: "desc" }, true)).get("dir")).toBe("asc");
  });

  test("keeps a parameter that is there twice", () => {
    expect(params(sortHref(params("state=draft&state=signed"), "name", null)).getAll("state")).toEqual([
      "draft",
      "signed",
    ]);
  });
});

describe("readSort", () => {
  const fallback = { by: "at", direction: "desc" } as const;

  test("takes only columns from the list, so that no column name reaches the database unseen", () => {
    expect(readSort(params("sort=password_hash&dir=asc"), ["name", "at"], fallback)).toEqual(fallback);
    expect(readSort(params("sort=name&dir=desc"), ["name", "at"], fallback)).toEqual({
      by: "name",
      direction: "desc",
    });
  });

  test("reads an unknown direction as ascending", () => {
    expect(readSort(params("sort=name&dir=sideways"), ["name", "at"], fallback).direction).toBe("asc");
  });
});

test.each([
  ["", 1],
  ["page=0", 1],
  ["page=-2", 1],
  ["page=2", 2],
  ["page=1e3", 1],
  ["page=9999999999", 1],
])("readPage: %s is page %i", (search, page) => {
  expect(readPage(params(search))).toBe(page);
});

test("withParams removes what is null and leaves the given parameters as they were", () => {
  const given = params("q=x&page=2");
  expect(withParams(given, { page: null })).toBe("?q=x");
  expect(given.get("page")).toBe("2");
});
