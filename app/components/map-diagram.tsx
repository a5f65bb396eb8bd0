/** The drawing of a map beside the editor and on the cards of starters. */
import type { Analysis } from "~/engine/analysis";
import type { EnergyMap } from "~/engine/energy-map";

export interface MapDiagramProps {
  map: EnergyMap;
  analysis?: Analysis;
  highlight?: { conductors: string[]; elements?: string[] } | null;
  /** Only the lines, for a small card. */
  tiny?: boolean;
}

export function MapDiagram({ map }: MapDiagramProps) {
  return (
    <span className="text-sm text-ink-soft">
      {map.elements.length} elements, {map.conductors.length} connections
    </span>
  );
}
