/**
 * A number with its unit. It is a text input with a decimal keyboard, not type="number": that one loses what was
 * typed when it is no number, and turns the wheel into a change of value.
 *   <NumberField field={fields.reading} label="Insulation resistance" unit="MΩ" size="bench" />
 */
import type { ComponentPropsWithRef } from "react";
import { controlSize, Field, type CommonFieldProps } from "./field";
import { initialText } from "./field-source";

export type NumberFieldProps = CommonFieldProps &
  Omit<ComponentPropsWithRef<"input">, "name" | "id" | "size" | "type" | "children" | "className"> & {
    unit?: string;
  };

export function NumberField({
  field,
  label,
  hint,
  size = "md",
  optional,
  hideLabel,
  className,
  unit,
  ...input
}: NumberFieldProps) {
  const initial = "value" in input ? {} : { defaultValue: initialText(field) };
  return (
    <Field
      {...{ field, hint, size, optional, hideLabel, className }}
      label={
        <>
          {label}
          {unit ? <span className="sr-only"> in {unit}</span> : null}
        </>
      }
    >
      {(attributes) => (
        <span className="flex items-stretch">
          <input
            type="text"
            inputMode="decimal"
            autoComplete="off"
            {...initial}
            {...input}
            {...attributes}
            className={`control-box min-w-0 text-right tabular-nums ${controlSize[size]}`}
          />
          {unit ? (
            <span
              aria-hidden
              className={
                "flex shrink-0 items-center border border-l-0 border-rule-strong bg-inset px-3 text-ink-soft " +
                (size === "bench" ? "min-w-16 justify-center text-xl" : "text-sm")
              }
            >
              {unit}
            </span>
          ) : null}
        </span>
      )}
    </Field>
  );
}
