import { renderToStaticMarkup } from "react-dom/server";
import { expect, test } from "vitest";
import { ChoiceGroupField } from "./choice-group-field";
import { InputField } from "./input-field";
import { NumberField } from "./number-field";

test("an error is named first, then the hint, and the typed text stays", () => {
  const html = renderToStaticMarkup(
    <InputField
      field={{ name: "email", id: "f-email", initialValue: "ines@", errors: ["This is no e-mail address."] }}
      label="E-mail"
      hint="For signing in"
      type="email"
    />,
  );
  expect(html).toContain('aria-describedby="f-email-error f-email-hint"');
  expect(html).toContain('id="f-email-error"');
  expect(html).toContain('id="f-email-hint"');
  expect(html).toContain('aria-invalid="true"');
  expect(html).toContain('value="ines@"');
  expect(html).toContain('<label for="f-email"');
});

test("a field without error or hint points nowhere", () => {
  const html = renderToStaticMarkup(<InputField field={{ name: "email" }} label="E-mail" />);
  expect(html).not.toContain("aria-describedby");
  expect(html).not.toContain("aria-invalid");
});

test("what was typed into a number field stays even when it is no number", () => {
  const html = renderToStaticMarkup(
    <NumberField field={{ name: "r", initialValue: "> 299,x" }} label="Reading" unit="MΩ" />,
  );
  expect(html).toContain('value="&gt; 299,x"');
  expect(html).toContain("in MΩ");
});

test("only the choice that was made is ticked, and none by default", () => {
  const options = [
    { value: "I", label: "Class I" },
    { value: "II", label: "Class II" },
  ];
  const chosen = renderToStaticMarkup(
    <ChoiceGroupField field={{ name: "class", initialValue: "II" }} label="Class" options={options} />,
  );
  expect(chosen.match(/checked=""/g)).toHaveLength(1);
  expect(chosen).toMatch(/<input[^>]*checked=""[^>]*value="II"|<input[^>]*value="II"[^>]*checked=""/);
  const none = renderToStaticMarkup(
    <ChoiceGroupField field={{ name: "class" }} label="Class" options={options} />,
  );
  expect(none).not.toContain('checked="');
});
