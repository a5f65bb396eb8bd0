/**
 * Label, hint and errors around any control. Use the ready fields (InputField, NumberField, SelectField …) first;
 * this one is for a control of your own:
 *   <Field field={fields.signature} label="Signature" hint="Draw or type">
 *     {(attributes) => <SignaturePad {...attributes} />}
 *   </Field>
 */
import { CircleAlert } from "lucide-react";
import type { ReactNode } from "react";
import { controlAttributes, fieldIds, type ControlAttributes, type FieldSource } from "./field-source";

export type FieldSize = "md" | "bench";

/** The props that every ready field shares. */
export interface CommonFieldProps {
  field: FieldSource;
  label: ReactNode;
  hint?: ReactNode;
  /** "bench" is for gloves: 56 px controls and larger type. */
  size?: FieldSize;
  /** Writes "(optional)" after the label; required fields carry no mark. */
  optional?: boolean;
  /** Keeps the label for assistive technology only (search boxes, table cells). */
  hideLabel?: boolean;
  className?: string;
}

/** The size of a one-line control. */
export const controlSize: Record<FieldSize, string> = {
  md: "min-h-10 pointer-coarse:min-h-11 px-3 py-2 text-base sm:text-sm pointer-coarse:text-base",
  bench: "min-h-14 px-4 py-3 text-xl",
};

export function Field({
  field,
  label,
  hint,
  size = "md",
  optional = false,
  hideLabel = false,
  className = "",
  children,
}: CommonFieldProps & { children: (attributes: ControlAttributes) => ReactNode }) {
  const ids = fieldIds(field);
  return (
    <div className={`min-w-0 ${className}`}>
      <label
        htmlFor={ids.control}
        className={hideLabel ? "sr-only" : `block font-medium ${size === "bench" ? "text-lg" : "text-sm"}`}
      >
        {label}
        {optional ? <span className="font-normal text-ink-soft"> (optional)</span> : null}
      </label>
      {hint ? <FieldHint id={ids.hint}>{hint}</FieldHint> : null}
      <div className={hideLabel ? "" : "mt-1"}>{children(controlAttributes(field, Boolean(hint)))}</div>
      <FieldErrors id={ids.error} errors={field.errors} />
    </div>
  );
}

export function FieldHint({ id, children }: { id: string; children: ReactNode }) {
  return (
    <p id={id} className="text-sm text-ink-soft">
      {children}
    </p>
  );
}

/** The errors of one field, each a line; nothing when there are none. */
export function FieldErrors({ id, errors }: { id: string; errors: string[] | undefined }) {
  if (!errors || errors.length === 0) return null;
  return (
    <ul id={id} className="mt-1 space-y-1 text-sm font-medium text-fail">
      {errors.map((error) => (
        <li key={error} className="flex items-start gap-1.5">
          <CircleAlert aria-hidden size={16} className="mt-0.5 shrink-0" />
          <span>{error}</span>
        </li>
      ))}
    </ul>
  );
}
