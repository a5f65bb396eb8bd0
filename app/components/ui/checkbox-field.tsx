/**
 * One box with its sentence.
 *   <CheckboxField field={fields.agreed} label="I have read the cautions" />
 */
import type { ComponentPropsWithRef } from "react";
import { FieldErrors, FieldHint, type CommonFieldProps } from "./field";
import { controlAttributes, fieldIds, initiallyChosen } from "./field-source";

export type CheckboxFieldProps = Omit<CommonFieldProps, "optional" | "hideLabel"> &
  Omit<
    ComponentPropsWithRef<"input">,
    "name" | "id" | "size" | "type" | "children" | "className" | "value"
  > & {
    /** What is sent when ticked; conform and browsers use "on". */
    value?: string;
  };

export function CheckboxField({
  field,
  label,
  hint,
  size = "md",
  className = "",
  value = "on",
  ...input
}: CheckboxFieldProps) {
  const ids = fieldIds(field);
  const initial =
    "checked" in input
      ? {}
      : { defaultChecked: initiallyChosen(field, value) || field.initialValue === true };
  const bench = size === "bench";
  return (
    <div className={className}>
      <label
        htmlFor={ids.control}
        className={`flex items-start gap-3 ${bench ? "min-h-14 py-3 text-lg" : "min-h-8 py-1 text-sm pointer-coarse:min-h-11 pointer-coarse:py-2.5"}`}
      >
        <input
          {...initial}
          {...input}
          {...controlAttributes(field, Boolean(hint))}
          type="checkbox"
          value={value}
          className={`shrink-0 accent-copper ${bench ? "size-7" : "mt-0.5 size-5"}`}
        />
        <span className="min-w-0">{label}</span>
      </label>
      {hint ? <FieldHint id={ids.hint}>{hint}</FieldHint> : null}
      <FieldErrors id={ids.error} errors={field.errors} />
    </div>
  );
}
