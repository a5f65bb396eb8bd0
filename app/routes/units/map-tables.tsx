import { type Column, DataTable } from "~/components/ui/data-table";
import { Sheet } from "~/components/ui/sheet";
import { elementKinds, type FieldDescriptor } from "~/engine/elements";
import type { Conductor, Element, EnergyMap } from "~/engine/energy-map";

/** The map's rows for reading: every datum, and "not known" where nobody knows it. */
export function MapTables({ map }: { map: EnergyMap }) {
  return (
    <>
      <Sheet title={`Elements (${map.elements.length})`} flush>
        <DataTable
          caption="Elements of the energy map"
          columns={elementColumns}
          rows={map.elements}
          rowKey={(element) => element.id}
        />
      </Sheet>
      <Sheet title={`Connections (${map.conductors.length})`} flush>
        <DataTable
          caption="Connections of the energy map"
          columns={conductorColumns}
          rows={map.conductors}
          rowKey={(conductor) => conductor.id}
        />
      </Sheet>
    </>
  );
}

const elementColumns: Column<Element>[] = [
  { id: "id", header: "Id", cell: (element) => element.id, primary: true },
  { id: "label", header: "Name", cell: (element) => element.label },
  { id: "kind", header: "Kind", cell: (element) => elementKinds[element.kind].label },
  { id: "data", header: "Data", cell: (element) => <ElementData element={element} /> },
];

function ElementData({ element }: { element: Element }) {
  const data: Record<string, unknown> = { ...element };
  const fields: FieldDescriptor[] = elementKinds[element.kind].fields;
  return (
    <dl className="flex flex-wrap gap-x-4 gap-y-0.5">
      {fields.map((field) => (
        <div key={field.name} className="flex gap-1">
          <dt className="text-ink-soft">{field.label}:</dt>
          <dd className="tabular-nums">{fieldText(field, data[field.name])}</dd>
        </div>
      ))}
    </dl>
  );
}

/** A datum in words: "2 A", "Blade, ISO 8820-3", "not known". */
function fieldText(field: FieldDescriptor, value: unknown): string {
  if (value === null || value === undefined || value === "unknown") return "not known";
  if (field.type === "choice")
    return field.choices?.find((choice) => choice.value === value)?.label ?? String(value);
  return field.unit ? `${String(value)} ${field.unit}` : String(value);
}

const conductorColumns: Column<Conductor>[] = [
  { id: "id", header: "Id", cell: (conductor) => conductor.id, primary: true },
  { id: "from", header: "From", cell: ({ from }) => `${from.element} · ${from.terminal}` },
  { id: "to", header: "To", cell: ({ to }) => `${to.element} · ${to.terminal}` },
  { id: "circuit", header: "Circuit", cell: ({ circuit }) => circuitWords[circuit] },
  { id: "area", header: "Cross-section", cell: ({ area }) => areaText(area), numeric: true },
  {
    id: "length",
    header: "Length",
    cell: ({ lengthM }) => (lengthM === null ? "not known" : `${lengthM} m`),
    numeric: true,
  },
  {
    id: "insulation",
    header: "Insulation",
    cell: ({ insulation }) => (insulation === "unknown" ? "not known" : insulation.toUpperCase()),
  },
];

const circuitWords: Record<Conductor["circuit"], string> = {
  mains: "Mains",
  elv: "Extra-low voltage",
  earth: "Earth",
};

function areaText(area: Conductor["area"]): string {
  if (area === null) return "not known";
  return "awg" in area ? `AWG ${area.awg}` : `${area.mm2} mm²`;
}
