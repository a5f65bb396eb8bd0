/**
 * A choice from a list. `placeholder` adds an empty first option, so that nothing is chosen by default.
 *   <SelectField field={fields.supply} label="Supply" placeholder="Choose" options={[{ value: "230", label: "230 V" }]} />
 */
import type { ComponentPropsWithRef } from "react";
import { controlSize, Field, type CommonFieldProps } from "./field";
import { initialText } from "./field-source";

export interface SelectOption {
  value: string;
  label: string;
  disabled?: boolean;
}

export type SelectFieldProps = CommonFieldProps &
  Omit<ComponentPropsWithRef<"select">, "name" | "id" | "size" | "children" | "className" | "multiple"> & {
    options: SelectOption[];
    placeholder?: string;
  };

export function SelectField({
  field,
  label,
  hint,
  size = "md",
  optional,
  hideLabel,
  className,
  options,
  placeholder,
  ...select
}: SelectFieldProps) {
  const initial = "value" in select ? {} : { defaultValue: initialText(field) ?? "" };
  return (
    <Field {...{ field, label, hint, size, optional, hideLabel, className }}>
      {(attributes) => (
        <select {...initial} {...select} {...attributes} className={`control-box pl-2! ${controlSize[size]}`}>
          {placeholder === undefined ? null : <option value="">{placeholder}</option>}
          {options.map((option) => (
            <option key={option.value} value={option.value} disabled={option.disabled}>
              {option.label}
            </option>
          ))}
        </select>
      )}
    </Field>
  );
}
