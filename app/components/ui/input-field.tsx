/**
 * A one-line text input with its label.
 *   <InputField field={fields.email} label="E-mail" type="email" autoComplete="username" />
 */
import type { ComponentPropsWithRef } from "react";
import { controlSize, Field, type CommonFieldProps } from "./field";
import { initialText } from "./field-source";

type InputType =
  "text" | "email" | "password" | "search" | "tel" | "url" | "date" | "time" | "datetime-local" | "month";

export type InputFieldProps = CommonFieldProps &
  Omit<ComponentPropsWithRef<"input">, "name" | "id" | "size" | "type" | "children" | "className"> & {
    type?: InputType;
  };

export function InputField({
  field,
  label,
  hint,
  size = "md",
  optional,
  hideLabel,
  className,
  ...input
}: InputFieldProps) {
  const initial = "value" in input ? {} : { defaultValue: initialText(field) };
  return (
    <Field {...{ field, label, hint, size, optional, hideLabel, className }}>
      {(attributes) => (
        <input
          type="text"
          dir="auto"
          minLength={field.minLength}
          maxLength={field.maxLength}
          pattern={field.pattern}
          {...initial}
          {...input}
          {...attributes}
          className={`control-box ${controlSize[size]}`}
        />
      )}
    </Field>
  );
}
