import { elementKinds, type FieldDescriptor } from "~/engine/elements";

/** Fields of conductors and of every element, which no kind describes. */
const ownLabels: Record<string, string> = {
  id: "Id",
  label: "Name",
  kind: "Kind",
  example: "Starter’s example figures",
  from: "From",
  to: "To",
  area: "Cross-section",
  lengthM: "Length",
  insulation: "Insulation",
  circuit: "Circuit",
  ambientC: "Hottest air around it",
};

const ownUnits: Record<string, string> = { lengthM: "m", ambientC: "°C" };

const descriptors = new Map<string, FieldDescriptor>(
  Object.values(elementKinds)
    .flatMap((kind): FieldDescriptor[] => kind.fields)
    .map((field) => [field.name, field]),
);

/** The words for a field that differs between two maps: "Rated current" for ratingAmps. */
export function changedFieldLabel(field: string): string {
  return ownLabels[field] ?? descriptors.get(field)?.label ?? field;
}

/** A value before or after a change, in words: "2.5 mm²", "X1 · L", "Blade, ISO 8820-3", "not known". */
export function changedValueText(field: string, value: unknown): string {
  if (value === null || value === undefined || value === "unknown") return "not known";
  if (value === "") return "empty";
  if (typeof value === "object") {
    if ("mm2" in value) return `${String(value.mm2)} mm²`;
    if ("awg" in value) return `AWG ${String(value.awg)}`;
    if ("element" in value && "terminal" in value)
      return `${String(value.element)} · ${String(value.terminal)}`;
    return JSON.stringify(value);
  }
  const descriptor = ownLabels[field] === undefined ? descriptors.get(field) : undefined;
  const chosen = descriptor?.choices?.find((choice) => choice.value === value)?.label;
  const unit = ownUnits[field] ?? (typeof value === "number" ? descriptor?.unit : null);
  return chosen ?? (unit ? `${String(value)} ${unit}` : String(value));
}
