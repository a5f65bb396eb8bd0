import { renderToStaticMarkup } from "react-dom/server";
import { expect, test } from "vitest";
import { InputField } from "./input-field";
import { PageHeader } from "./page-header";
import { TextareaField } from "./textarea-field";
import { TitleBlock } from "./title-block";

test("names written from right to left decide the direction of their own place", () => {
  expect(renderToStaticMarkup(<PageHeader title="صندوق" />)).toMatch(/<h1 dir="auto"[^>]*>صندوق/);
  expect(renderToStaticMarkup(<TitleBlock items={[{ label: "Built by", value: "عمر" }]} />)).toMatch(
    /<dd dir="auto"[^>]*>عمر/,
  );
  expect(renderToStaticMarkup(<InputField field={{ name: "name" }} label="Name" />)).toMatch(
    /<input[^>]* dir="auto"/,
  );
  expect(renderToStaticMarkup(<TextareaField field={{ name: "text" }} label="Text" />)).toMatch(
    /<textarea[^>]* dir="auto"/,
  );
});
