/**
 * A few choices side by side, as boxes that can be tapped: radio buttons, or boxes to tick with `multiple`.
 *   <ChoiceGroupField field={fields.verdict} label="What do you see?" size="bench"
 *     options={[{ value: "conforms", label: "Conforms", hint: "No damage" }, { value: "not", label: "Does not" }]} />
 */
import type { ChangeEventHandler, ReactNode } from "react";
import { FieldErrors, FieldHint, type CommonFieldProps } from "./field";
import { controlAttributes, fieldIds, initiallyChosen } from "./field-source";

export interface Choice {
  value: string;
  label: ReactNode;
  hint?: ReactNode;
  disabled?: boolean;
}

export interface ChoiceGroupFieldProps extends CommonFieldProps {
  options: Choice[];
  multiple?: boolean;
  columns?: 1 | 2 | 3;
  /** Makes the group controlled. */
  value?: string | string[];
  onChange?: ChangeEventHandler<HTMLInputElement>;
}

const columnClass = { 1: "grid-cols-1", 2: "sm:grid-cols-2", 3: "sm:grid-cols-3" } as const;

export function ChoiceGroupField({
  field,
  label,
  hint,
  size = "md",
  optional = false,
  hideLabel = false,
  className = "",
  options,
  multiple = false,
  columns = 1,
  value,
  onChange,
}: ChoiceGroupFieldProps) {
  const ids = fieldIds(field);
  const { id: _id, required, ...attributes } = controlAttributes(field, Boolean(hint));
  const bench = size === "bench";
  return (
    <fieldset className={`min-w-0 ${className}`} aria-describedby={attributes["aria-describedby"]}>
      <legend className={hideLabel ? "sr-only" : `font-medium ${bench ? "text-lg" : "text-sm"}`}>
        {label}
        {optional ? <span className="font-normal text-ink-soft"> (optional)</span> : null}
      </legend>
      {hint ? <FieldHint id={ids.hint}>{hint}</FieldHint> : null}
      <div className={`mt-1 grid gap-2 ${columnClass[columns]}`}>
        {options.map((option, index) => (
          <label
            key={option.value}
            className={
              "flex cursor-pointer items-start gap-3 rounded-sm border border-rule-strong bg-sheet px-3 hover:bg-inset " +
              "has-checked:border-copper has-checked:bg-copper-wash has-checked:ring-1 has-checked:ring-copper " +
              "has-disabled:cursor-not-allowed has-disabled:opacity-60 " +
              (bench
                ? "min-h-14 py-3.5 text-lg"
                : "min-h-10 py-2 text-sm pointer-coarse:min-h-11 pointer-coarse:py-2.5")
            }
          >
            <input
              {...attributes}
              // The first one takes the field's id: an error summary's link and conform's focus land there.
              id={index === 0 ? ids.control : `${ids.control}-${option.value}`}
              type={multiple ? "checkbox" : "radio"}
              required={multiple ? undefined : required}
              value={option.value}
              disabled={option.disabled}
              onChange={onChange}
              {...(value === undefined
                ? { defaultChecked: initiallyChosen(field, option.value) }
                : { checked: Array.isArray(value) ? value.includes(option.value) : value === option.value })}
              className={`shrink-0 accent-copper ${bench ? "size-7" : "size-5"}`}
            />
            <span className="min-w-0">
              <span className="font-medium">{option.label}</span>
              {option.hint ? <span className="block text-sm text-ink-soft">{option.hint}</span> : null}
            </span>
          </label>
        ))}
      </div>
      <FieldErrors id={ids.error} errors={field.errors} />
    </fieldset>
  );
}
