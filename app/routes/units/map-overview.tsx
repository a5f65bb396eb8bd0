import { useMemo, useState } from "react";
import { MapDiagram } from "~/components/map-diagram";
import { StatementList } from "~/components/statement-list";
import { EmptyState } from "~/components/ui/empty-state";
import { LinkButton } from "~/components/ui/link-button";
import { Sheet } from "~/components/ui/sheet";
import { analyse } from "~/engine/analyse";
import type { Statement } from "~/engine/analysis";
import type { EnergyMap } from "~/engine/energy-map";
import type { RuleSet } from "~/engine/rule-set";
import type { UnitFacts } from "~/engine/unit-facts";

export interface MapOverviewProps {
  map: EnergyMap;
  ruleSet: RuleSet;
  facts: UnitFacts;
  base: string;
  mayEdit: boolean;
}

/** The drawing of the map and what the engine says of it. */
export function MapOverview({ map, ruleSet, facts, base, mayEdit }: MapOverviewProps) {
  const analysis = useMemo(() => analyse(map, ruleSet, facts), [map, ruleSet, facts]);
  const [pointed, setPointed] = useState<Statement | null>(null);
  if (map.elements.length === 0) {
    return (
      <EmptyState
        title="No energy map yet"
        action={
          mayEdit ? (
            <LinkButton to={`${base}/map`} variant="primary">
              Begin the map
            </LinkButton>
          ) : null
        }
      >
        It says where energy comes from, what it passes and where it ends. Everything else is computed from
        it.
      </EmptyState>
    );
  }
  return (
    <div className="space-y-5">
      <Sheet title="Energy map">
        <MapDiagram map={map} analysis={analysis} highlight={pointed} />
      </Sheet>
      <Sheet
        title="What the engine says"
        lead="Computed from the map. It advises; measuring and local codes decide."
      >
        <StatementList statements={analysis.statements} onPoint={setPointed} />
      </Sheet>
    </div>
  );
}
