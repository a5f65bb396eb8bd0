/**
 * What a field component needs to know about its form field. Conform's field metadata fits as it is
 * (`field={fields.name}`); a form without conform passes a plain object (`field={{ name: "q", initialValue: q }}`).
 */
export interface FieldSource {
  name: string;
  id?: string;
  formId?: string;
  errorId?: string;
  descriptionId?: string;
  initialValue?: unknown;
  errors?: string[] | undefined;
  required?: boolean;
  minLength?: number;
  maxLength?: number;
  pattern?: string;
}

/** The control's attributes that tie it to its label, hint and errors. */
export interface ControlAttributes {
  id: string;
  name: string;
  form: string | undefined;
  required: boolean | undefined;
  "aria-invalid": true | undefined;
  "aria-describedby": string | undefined;
}

/** Ids of the parts of a field, derived from the control's id so that server and browser agree. */
export function fieldIds(field: FieldSource): { control: string; hint: string; error: string } {
  const control = field.id ?? `field-${field.name}`;
  return {
    control,
    hint: field.descriptionId ?? `${control}-hint`,
    error: field.errorId ?? `${control}-error`,
  };
}

/** The attributes of a control; `aria-describedby` names the error first, then the hint. */
export function controlAttributes(field: FieldSource, hasHint: boolean): ControlAttributes {
  const ids = fieldIds(field);
  const invalid = (field.errors?.length ?? 0) > 0;
  const describedBy = [invalid ? ids.error : null, hasHint ? ids.hint : null].filter((id) => id !== null);
  return {
    id: ids.control,
    name: field.name,
    form: field.formId,
    required: field.required || undefined,
    "aria-invalid": invalid || undefined,
    "aria-describedby": describedBy.length > 0 ? describedBy.join(" ") : undefined,
  };
}

/** The initial value as a text control wants it; anything that is no text or number is left empty. */
export function initialText(field: FieldSource): string | undefined {
  const value = field.initialValue;
  if (typeof value === "string") return value;
  if (typeof value === "number" && Number.isFinite(value)) return String(value);
  return undefined;
}

/** Whether `option` is among the initial values of a group of boxes (a text or a list of texts). */
export function initiallyChosen(field: FieldSource, option: string): boolean {
  const value = field.initialValue;
  return Array.isArray(value) ? value.includes(option) : value === option;
}
