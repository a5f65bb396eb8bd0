import { useState } from "react";
import { SeverityBadge } from "~/components/ui/severity-badge";
import { Sheet } from "~/components/ui/sheet";
import type { Analysis, Statement, StatementLevel } from "~/engine/analysis";
import type { EnergyMap } from "~/engine/energy-map";

const order: StatementLevel[] = ["danger", "defect", "unknown", "caution", "good"];

/** What the engine says of the map before anybody has measured, worst first; a statement can be shown in the diagram. */
export function EngineAnswers({ map, analysis }: { map: EnergyMap; analysis: Analysis }) {
  const [chosen, setChosen] = useState<string | null>(null);
  const statements = [...analysis.statements].sort((a, b) => order.indexOf(a.level) - order.indexOf(b.level));
  return (
    <Sheet
      title="What the map says beforehand"
      lead="Computed from the energy map alone; nothing here was measured."
    >
      {statements.length === 0 ? (
        <p className="text-ink-soft">The engine has nothing to say about this map. That is no pass.</p>
      ) : (
        <ul className="space-y-2">
          {statements.map((statement) => (
            <StatementLine
              key={statement.id}
              statement={statement}
              map={map}
              chosen={chosen === statement.id}
              onChoose={() => setChosen(chosen === statement.id ? null : statement.id)}
            />
          ))}
        </ul>
      )}
    </Sheet>
  );
}

function StatementLine({
  statement,
  map,
  chosen,
  onChoose,
}: {
  statement: Statement;
  map: EnergyMap;
  chosen: boolean;
  onChoose: () => void;
}) {
  const names = statement.elements.map(
    (id) => map.elements.find((element) => element.id === id)?.label ?? id,
  );
  return (
    <li className="grid gap-x-3 gap-y-1 sm:grid-cols-[6.5rem_1fr]">
      <span>
        <SeverityBadge severity={statement.level} />
      </span>
      <span>
        {statement.text}
        {names.length > 0 ? <span className="block text-sm text-ink-soft">{names.join(", ")}</span> : null}
        <button type="button" hidden aria-pressed={chosen} onClick={onChoose}>
          Show in the diagram
        </button>
      </span>
    </li>
  );
}
