import { changedFieldLabel, changedValueText } from "~/components/map-change-words";
import type { MapChange } from "~/engine/compare-maps";

const changeWords: Record<MapChange["change"], string> = {
  added: "Added",
  removed: "Removed",
  changed: "Changed",
};

/** What differs between two maps, row by row and field by field. */
export function ChangeList({ changes }: { changes: readonly MapChange[] }) {
  if (changes.length === 0) return <p className="text-ink-soft">Nothing in the map has changed yet.</p>;
  return (
    <ul className="divide-y divide-rule">
      {changes.map((change) => (
        <li key={`${change.subject} ${change.id}`} className="py-2 text-sm">
          <span className="font-semibold">
            {changeWords[change.change]}: {change.subject === "element" ? "element" : "connection"}{" "}
            {change.id}
          </span>
          {change.fields.length > 0 ? (
            <ul className="mt-0.5 space-y-0.5 pl-4">
              {change.fields.map(({ field, before, after }) => (
                <li key={field}>
                  {changedFieldLabel(field)}:{" "}
                  <del className="text-ink-soft">{changedValueText(field, before)}</del> →{" "}
                  <ins className="font-medium no-underline">{changedValueText(field, after)}</ins>
                </li>
              ))}
            </ul>
          ) : null}
        </li>
      ))}
    </ul>
  );
}
