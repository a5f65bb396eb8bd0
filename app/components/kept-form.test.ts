import { expect, test } from "vitest";
import { forgetForm, keepForm, readKept, wasTaken } from "./kept-form";

function shelf() {
  const items = new Map<string, string>();
  return {
    getItem: (key: string) => items.get(key) ?? null,
    setItem: (key: string, value: string) => void items.set(key, value),
    removeItem: (key: string) => void items.delete(key),
    text: () => [...items.values()].join(),
  };
}

function typed(values: Record<string, string>): FormData {
  const form = new FormData();
  for (const [name, value] of Object.entries(values)) form.set(name, value);
  return form;
}

test("the named fields are kept and found again, and never a password or a signature", () => {
  const place = shelf();
  const form = typed({ statement: "It is safe.", place: "", password: "secret words", typedName: "Ada" });
  keepForm(() => place, "sign", form, ["statement", "place"]);
  expect(place.text()).not.toMatch(/secret|Ada/);
  expect(readKept(() => place, "sign", ["statement", "place"])).toEqual({
    statement: "It is safe.",
    place: "",
  });
  expect(readKept(() => place, "other", ["statement"])).toBeNull();
  forgetForm(() => place, "sign");
  expect(readKept(() => place, "sign", ["statement"])).toBeNull();
});

test("a browser that keeps nothing, or keeps something broken, stops nobody", () => {
  const blocked = () => {
    throw new Error("SecurityError");
  };
  keepForm(blocked, "sign", typed({ statement: "x" }), ["statement"]);
  forgetForm(blocked, "sign");
  expect(readKept(blocked, "sign", ["statement"])).toBeNull();
  const place = shelf();
  for (const text of ["{", "null", "[]", '{"statement":1}', '{"password":"x"}']) {
    place.setItem("sign", text);
    expect(readKept(() => place, "sign", ["statement"])).toBeNull();
  }
});

test("a form counts as taken when it leads to another page, but not to the sign-in page", () => {
  const here = "/w/demo/units/new";
  const formData = new FormData();
  const to = (pathname: string) => ({ state: "loading" as const, formData, location: { pathname } });
  expect(wasTaken(to("/w/demo/units/7/map"), here)).toBe(true);
  expect(wasTaken(to("/sign-in"), here)).toBe(false);
  expect(wasTaken(to(here), here)).toBe(false);
  expect(wasTaken({ ...to("/w/demo/units/7/map"), state: "submitting" }, here)).toBe(false);
  expect(wasTaken({ state: "loading", location: { pathname: "/w/demo/units" } }, here)).toBe(false);
});
