/** The drawing of a map, with what a statement names picked out in the statement's own tone. */
import type { Analysis, Statement, StatementLevel } from "~/engine/analysis";
import type { EnergyMap } from "~/engine/energy-map";
import { EnergyDiagram } from "./energy-diagram";

export interface MapDiagramProps {
  map: EnergyMap;
  analysis?: Analysis;
  /** The statement under pointer or focus. */
  highlight?: Statement | null;
}

const tones: Record<StatementLevel, "danger" | "defect" | "caution" | "note"> = {
  danger: "danger",
  defect: "defect",
  caution: "caution",
  unknown: "caution",
  good: "note",
};

export function MapDiagram({ map, analysis, highlight = null }: MapDiagramProps) {
  return (
    <EnergyDiagram
      map={map}
      analysis={analysis}
      highlight={
        highlight && {
          conductors: highlight.conductors,
          elements: highlight.elements,
          tone: tones[highlight.level],
        }
      }
    />
  );
}
