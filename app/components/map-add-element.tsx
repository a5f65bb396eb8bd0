import { Plus } from "lucide-react";
import { useState } from "react";
import { elementKinds, elementKindList } from "~/engine/elements";
import type { ElementKind } from "~/engine/energy-map";
import { Button } from "./ui/button";

const groups: { group: string; title: string }[] = [
  { group: "source", title: "Sources" },
  { group: "change", title: "Change of voltage" },
  { group: "protect", title: "Protection" },
  { group: "switch", title: "Switches" },
  { group: "use", title: "Use" },
  { group: "suppress", title: "Suppression and discharge" },
  { group: "earth", title: "Earth and touchable parts" },
];

/** Chooses the kind of a new element, grouped by what kinds are for. */
export function AddElement({ onAdd }: { onAdd: (kind: ElementKind) => void }) {
  const [kind, setKind] = useState<ElementKind | "">("");
  return (
    <form
      className="flex flex-wrap items-end gap-2 px-3 py-3"
      onSubmit={(event) => {
        event.preventDefault();
        if (kind !== "") onAdd(kind);
      }}
    >
      <div className="min-w-44 flex-1">
        <label htmlFor="new-element-kind" className="block text-xs font-medium text-ink-soft">
          New element
        </label>
        <select
          id="new-element-kind"
          value={kind}
          onChange={(event) =>
            setKind(elementKindList.find((each) => each === event.currentTarget.value) ?? "")
          }
          className="control-box min-h-9 px-2 py-1 text-sm pointer-coarse:min-h-11"
        >
          <option value="">Choose a kind</option>
          {groups.map(({ group, title }) => (
            <optgroup key={group} label={title}>
              {elementKindList
                .filter((each) => elementKinds[each].group === group)
                .map((each) => (
                  <option key={each} value={each}>
                    {elementKinds[each].label}
                  </option>
                ))}
            </optgroup>
          ))}
        </select>
      </div>
      <Button type="submit" icon={Plus} disabled={kind === ""}>
        Add element
      </Button>
    </form>
  );
}
