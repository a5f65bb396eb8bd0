/**
 * Several lines of text with a label; grows with what is typed where the browser can.
 *   <TextareaField field={fields.purpose} label="What it is for" rows={4} />
 */
import type { ComponentPropsWithRef } from "react";
import { controlSize, Field, type CommonFieldProps } from "./field";
import { initialText } from "./field-source";

export type TextareaFieldProps = CommonFieldProps &
  Omit<ComponentPropsWithRef<"textarea">, "name" | "id" | "children" | "className">;

export function TextareaField({
  field,
  label,
  hint,
  size = "md",
  optional,
  hideLabel,
  className,
  rows = 3,
  ...textarea
}: TextareaFieldProps) {
  const initial = "value" in textarea ? {} : { defaultValue: initialText(field) };
  return (
    <Field {...{ field, label, hint, size, optional, hideLabel, className }}>
      {(attributes) => (
        <textarea
          dir="auto"
          rows={rows}
          minLength={field.minLength}
          maxLength={field.maxLength}
          {...initial}
          {...textarea}
          {...attributes}
          className={`control-box field-sizing-content max-h-96 min-h-20 ${controlSize[size]}`}
        />
      )}
    </Field>
  );
}
