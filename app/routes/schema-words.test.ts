import { expect, test } from "vitest";
import { z } from "zod";
import { speakPlainly } from "~/components/schema-words";

speakPlainly();

const modules = import.meta.glob<Record<string, unknown>>("./*/*.schema.ts", { eager: true });

/** What a hostile or clumsy sender may put into every field. */
const values: unknown[] = [
  undefined,
  "",
  "x".repeat(500_000),
  "-1",
  "1.5",
  -1,
  1.5,
  1e12,
  ["x".repeat(300)],
  { a: "b" },
];

interface FormOfFields {
  name: string;
  schema: z.ZodType;
  shape: z.core.$ZodShape;
}

function objectsIn(name: string, schema: unknown): FormOfFields[] {
  if (schema instanceof z.ZodDiscriminatedUnion)
    return schema.options.flatMap((option: unknown) => objectsIn(name, option));
  return schema instanceof z.ZodObject ? [{ name, schema, shape: schema.shape }] : [];
}

const forms = Object.entries(modules).flatMap(([file, exported]) =>
  Object.entries(exported).flatMap(([name, schema]) => objectsIn(`${file} ${name}`, schema)),
);

test("there are forms to look at", () => expect(forms.length).toBeGreaterThan(25));

test.each(forms)("$name tells every mistake in words of its own", ({ schema, shape }) => {
  const raw: string[] = [];
  for (const value of values) {
    const input = Object.fromEntries(
      Object.entries(shape).map(([field, of]) => [field, of instanceof z.ZodLiteral ? of.value : value]),
    );
    for (const issue of schema.safeParse(input).error?.issues ?? []) {
      if (/^(Invalid|Too big|Too small|Unrecognized|Expected)/.test(issue.message)) {
        raw.push(`${issue.path.join(".")}: ${issue.message}`);
      }
    }
  }
  expect([...new Set(raw)]).toEqual([]);
});
