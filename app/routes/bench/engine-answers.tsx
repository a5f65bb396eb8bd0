import { useState } from "react";
import { MapDiagram } from "~/components/map-diagram";
import { byLevel, StatementList } from "~/components/statement-list";
import { Sheet } from "~/components/ui/sheet";
import type { Analysis, Statement } from "~/engine/analysis";
import type { EnergyMap } from "~/engine/energy-map";

/** The diagram and what the engine says of it before anybody has measured: what is wrong or unknown first, the rest on request. */
export function EngineAnswers({ map, analysis }: { map: EnergyMap; analysis: Analysis }) {
  const [pointed, setPointed] = useState<Statement | null>(null);
  const statements = [...analysis.statements].sort(byLevel);
  const notable = statements.filter(({ level }) => level !== "good");
  const good = statements.filter(({ level }) => level === "good");
  return (
    <Sheet
      title="What the map says beforehand"
      lead="Computed from the energy map alone; nothing here was measured."
    >
      <div className="space-y-4">
        <MapDiagram map={map} analysis={analysis} highlight={pointed} />
        {statements.length === 0 ? (
          <p className="text-ink-soft">The engine has nothing to say about this map. That is no pass.</p>
        ) : null}
        {notable.length > 0 ? <StatementList statements={notable} onPoint={setPointed} /> : null}
        {good.length > 0 ? (
          <details>
            <summary className="min-h-11 py-2 font-medium">
              {good.length === 1
                ? "1 thing that it finds right"
                : `${good.length} things that it finds right`}
            </summary>
            <StatementList statements={good} onPoint={setPointed} />
          </details>
        ) : null}
      </div>
    </Sheet>
  );
}
