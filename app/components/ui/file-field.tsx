/**
 * Chooses files, or takes a photo with `capture`.
 *   <FileField field={fields.photo} label="Photo" accept="image/*" capture="environment" size="bench" />
 */
import type { ComponentPropsWithRef } from "react";
import { Field, type CommonFieldProps } from "./field";

export type FileFieldProps = CommonFieldProps &
  Omit<ComponentPropsWithRef<"input">, "name" | "id" | "size" | "type" | "children" | "className" | "value">;

export function FileField({
  field,
  label,
  hint,
  size = "md",
  optional,
  hideLabel,
  className,
  ...input
}: FileFieldProps) {
  const bench = size === "bench";
  return (
    <Field {...{ field, label, hint, size, optional, hideLabel, className }}>
      {(attributes) => (
        <input
          {...input}
          {...attributes}
          type="file"
          className={
            "control-box border-dashed file:mr-4 file:cursor-pointer file:border-0 file:border-r file:border-rule-strong " +
            "file:bg-inset file:px-4 file:font-semibold file:text-ink " +
            (bench ? "text-lg file:min-h-14" : "text-sm file:min-h-10 pointer-coarse:file:min-h-11")
          }
        />
      )}
    </Field>
  );
}
