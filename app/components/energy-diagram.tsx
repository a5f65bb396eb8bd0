import { useId, useMemo } from "react";

import type { Analysis } from "~/engine/analysis";
import type { ConductorRole } from "~/engine/conductor-roles";
import { elementKinds } from "~/engine/elements";
import type { EnergyMap } from "~/engine/energy-map";

import {
  layoutDiagram,
  type Diagram,
  type DiagramNode,
  type DiagramPoint,
  type DiagramWire,
} from "./energy-diagram-layout";

/**
 * The drawing of an energy map: sources left, loads right, conductors in their IEC 60445 colours with a letter beside the
 * colour. Conductors that stay live with every switch off are marked when the analysis is given. A table says the same.
 * @example <EnergyDiagram map={map} analysis={analysis} highlight={{ conductors: ["W3"], tone: "danger" }} />
 */
export interface EnergyDiagramProps {
  map: EnergyMap;
  analysis?: Analysis;
  highlight?: {
    conductors: string[];
    elements?: string[];
    tone?: "danger" | "defect" | "caution" | "note";
  } | null;
  /** Draws the contacts in these positions; without it, as when on. */
  switchStates?: Record<string, "on" | "off">;
  /** Only boxes and lines, for a small card; no table, no legend. */
  tiny?: boolean;
}

export function EnergyDiagram({
  map,
  analysis,
  highlight = null,
  switchStates,
  tiny = false,
}: EnergyDiagramProps) {
  const titleId = useId();
  const diagram = useMemo(() => layoutDiagram(map), [map]);
  const live = useMemo(
    () => new Set(analysis?.isolation.whenOff.map(({ conductor }) => conductor) ?? []),
    [analysis],
  );
  if (map.elements.length === 0) return <p className="text-sm text-ink-soft">Nothing on the map yet.</p>;
  const lit = new Set(highlight?.conductors ?? []);
  const litElements = new Set(highlight?.elements ?? []);
  const tone = toneColour[highlight?.tone ?? "note"];
  const title = `Energy map with ${map.elements.length} elements and ${map.conductors.length} conductors`;
  const picture = (
    <svg
      role="img"
      aria-labelledby={titleId}
      viewBox={`0 0 ${Math.ceil(diagram.width)} ${Math.ceil(diagram.height)}`}
      width="100%"
      // It shrinks a little to fit, then scrolls; paper can't scroll, so there it shrinks to the sheet's width.
      style={tiny ? undefined : { width: `clamp(${0.72 * diagram.width}px, 100%, ${diagram.width}px)` }}
      className={tiny ? "max-h-40" : "h-auto max-w-none print:max-w-full"}
      fontFamily="var(--font-sans)"
    >
      <title id={titleId}>{title}</title>
      {diagram.wires.map((wire) => (
        <Wire
          key={wire.id}
          wire={wire}
          live={live.has(wire.id)}
          lit={lit.has(wire.id)}
          tone={tone}
          tiny={tiny}
        />
      ))}
      {diagram.nodes.map((node) => (
        <Box
          key={node.id}
          node={node}
          lit={litElements.has(node.id)}
          tone={tone}
          tiny={tiny}
          state={switchStates?.[node.id] ?? "on"}
        />
      ))}
    </svg>
  );
  if (tiny) return picture;
  return (
    <figure className="grid gap-2">
      <div
        className="overflow-x-auto border border-rule bg-sheet print:min-w-0 print:overflow-visible"
        tabIndex={0}
        aria-label="Diagram, scrolls sideways"
      >
        {picture}
      </div>
      <Legend anyLive={live.size > 0} />
      <MapTable map={map} diagram={diagram} live={live} />
    </figure>
  );
}

const toneColour = {
  danger: "var(--color-danger)",
  defect: "var(--color-defect)",
  caution: "var(--color-caution-edge)",
  note: "var(--color-copper)",
} as const;

const roleColour: Record<ConductorRole, string> = {
  line: "var(--color-line)",
  neutral: "var(--color-neutral)",
  earth: "var(--color-earth)",
  plus: "var(--color-dc-plus)",
  minus: "var(--color-dc-minus)",
  ac: "var(--color-ink)",
  other: "var(--color-ink-soft)",
};
const roleLetter: Record<ConductorRole, string> = {
  line: "L",
  neutral: "N",
  earth: "PE",
  plus: "+",
  minus: "−",
  ac: "~",
  other: "",
};
const roleWord: Record<ConductorRole, string> = {
  line: "line",
  neutral: "neutral",
  earth: "protective earth",
  plus: "direct, plus",
  minus: "direct, minus",
  ac: "alternating, from a transformer",
  other: "not fed",
};

const pathText = (path: DiagramPoint[]) =>
  path.map(({ x, y }, index) => `${index === 0 ? "M" : "L"}${x} ${y}`).join(" ");

function Wire({
  wire,
  live,
  lit,
  tone,
  tiny,
}: {
  wire: DiagramWire;
  live: boolean;
  lit: boolean;
  tone: string;
  tiny: boolean;
}) {
  const d = pathText(wire.path);
  const stroke = { fill: "none", strokeLinejoin: "round" as const };
  const label = `${wire.id} ${roleLetter[wire.role]}`.trim();
  const width = label.length * 5.4 + 6;
  return (
    <g data-conductor={wire.id}>
      <title>{`${wire.id}: ${roleWord[wire.role]}, from ${wire.from} to ${wire.to}${live ? ", live with every switch off" : ""}`}</title>
      {live && <path d={d} {...stroke} stroke="var(--color-live)" strokeWidth={8} opacity={0.28} />}
      {lit && <path d={d} {...stroke} stroke={tone} strokeWidth={9} opacity={0.45} />}
      {wire.role === "minus" && (
        <path d={d} {...stroke} stroke="var(--color-dc-minus-edge)" strokeWidth={4.4} />
      )}
      <path d={d} {...stroke} stroke={roleColour[wire.role]} strokeWidth={wire.role === "minus" ? 2 : 2.4} />
      {wire.role === "earth" && (
        <path d={d} {...stroke} stroke="var(--color-earth-yellow)" strokeWidth={2.4} strokeDasharray="5 5" />
      )}
      {!tiny && (
        <g transform={`translate(${wire.labelAt.x} ${wire.labelAt.y})`}>
          <rect
            x={-width / 2}
            y={-7}
            width={width}
            height={14}
            rx={2}
            fill="var(--color-sheet)"
            stroke={live ? "var(--color-live)" : "var(--color-rule)"}
            strokeWidth={live ? 1.4 : 0.7}
          />
          <text
            textAnchor="middle"
            y={3.4}
            fontSize={9.5}
            fill="var(--color-ink)"
            fontWeight={live ? 700 : 500}
          >
            {label}
          </text>
        </g>
      )}
    </g>
  );
}

function Box({
  node,
  lit,
  tone,
  tiny,
  state,
}: {
  node: DiagramNode;
  lit: boolean;
  tone: string;
  tiny: boolean;
  state: "on" | "off";
}) {
  const { element, x, y, width, height } = node;
  return (
    <g data-element={node.id}>
      <title>{`${node.id}: ${elementKinds[element.kind].label}${element.label === "" ? "" : `, ${element.label}`}`}</title>
      <rect
        x={x}
        y={y}
        width={width}
        height={height}
        rx={2}
        fill="var(--color-sheet)"
        stroke={lit ? tone : "var(--color-ink)"}
        strokeWidth={lit ? 3 : 1.1}
      />
      <line x1={x} x2={x + width} y1={y + 34} y2={y + 34} stroke="var(--color-rule)" strokeWidth={0.8} />
      <text x={x + 7} y={y + 14} fontSize={tiny ? 16 : 12} fontWeight={700} fill="var(--color-ink)">
        {node.id}
      </text>
      {!tiny && (
        <>
          <text
            x={x + width - 7}
            y={y + 14}
            fontSize={10}
            textAnchor="end"
            fill="var(--color-ink)"
            fontWeight={600}
          >
            {element.kind === "switch" ? state : shorten(node.lines[0] ?? "", 17)}
          </text>
          <text x={x + 7} y={y + 28} fontSize={10} fill="var(--color-ink-soft)">
            {shorten(element.label === "" ? elementKinds[element.kind].label : element.label, 23)}
          </text>
        </>
      )}
      {element.kind === "switch" && <Contacts node={node} state={state} />}
      {node.ports.map((port) => (
        <g key={port.terminal}>
          <circle
            cx={port.x}
            cy={port.y}
            r={3}
            fill={port.joined ? "var(--color-ink)" : "var(--color-sheet)"}
            stroke="var(--color-ink)"
            strokeWidth={1.1}
          />
          {!tiny && (
            <text
              x={port.side === "left" ? port.x + 7 : port.x - 7}
              y={port.y + 3.2}
              fontSize={9}
              textAnchor={port.side === "left" ? "start" : "end"}
              fill="var(--color-ink-soft)"
            >
              {port.terminal.replace("-", "−")}
            </text>
          )}
        </g>
      ))}
    </g>
  );
}

/** Each pole as a line from contact to contact: whole when closed, lifted when open. */
function Contacts({ node, state }: { node: DiagramNode; state: "on" | "off" }) {
  const { element } = node;
  if (element.kind !== "switch") return null;
  const poles = Array.from({ length: element.poles }, (_, index) => index + 1);
  const port = (terminal: string) => node.ports.find((each) => each.terminal === terminal);
  return (
    <>
      {poles.map((pole) => {
        const from = port(element.throw === "single" ? `${pole}a` : `${pole}c`);
        const to = port(element.throw === "single" ? `${pole}b` : `${pole}${state === "on" ? "a" : "b"}`);
        if (from === undefined || to === undefined) return null;
        const closed = element.throw === "changeover" || state === "on";
        const inset = (side: "left" | "right") => (side === "left" ? 30 : -30);
        const [x1, x2] = [from.x + inset(from.side), to.x + inset(to.side)];
        return (
          <line
            key={pole}
            x1={x1}
            y1={from.y}
            x2={closed ? x2 : (x1 + 2 * x2) / 3}
            y2={closed ? to.y : to.y - 9}
            stroke="var(--color-ink)"
            strokeWidth={1.6}
          />
        );
      })}
    </>
  );
}

const shorten = (text: string, most: number) => (text.length <= most ? text : `${text.slice(0, most - 1)}…`);

function Legend({ anyLive }: { anyLive: boolean }) {
  const roles: ConductorRole[] = ["line", "neutral", "earth", "plus", "minus", "ac"];
  return (
    <ul className="flex flex-wrap gap-x-4 gap-y-1 text-xs text-ink-soft" aria-label="Colours of conductors">
      {roles.map((role) => (
        <li key={role} className="flex items-center gap-1.5">
          <svg width={26} height={8} aria-hidden="true">
            {role === "minus" && (
              <line x1={0} x2={26} y1={4} y2={4} stroke="var(--color-dc-minus-edge)" strokeWidth={4.4} />
            )}
            <line
              x1={0}
              x2={26}
              y1={4}
              y2={4}
              stroke={roleColour[role]}
              strokeWidth={role === "minus" ? 2 : 2.4}
            />
            {role === "earth" && (
              <line
                x1={0}
                x2={26}
                y1={4}
                y2={4}
                stroke="var(--color-earth-yellow)"
                strokeWidth={2.4}
                strokeDasharray="5 5"
              />
            )}
          </svg>
          {roleLetter[role]} {roleWord[role]}
        </li>
      ))}
      {anyLive && (
        <li className="flex items-center gap-1.5">
          <svg width={26} height={10} aria-hidden="true">
            <line x1={0} x2={26} y1={5} y2={5} stroke="var(--color-live)" strokeWidth={8} opacity={0.28} />
          </svg>
          live with every switch off (label in a frame)
        </li>
      )}
    </ul>
  );
}

function MapTable({ map, diagram, live }: { map: EnergyMap; diagram: Diagram; live: Set<string> }) {
  return (
    <details className="text-sm">
      <summary className="min-h-11 py-2">The same as a table</summary>
      <div className="overflow-x-auto">
        <table className="w-full border-collapse text-left">
          <caption className="sr-only">Elements of the map</caption>
          <thead>
            <tr className="border-b border-rule-strong">
              <th scope="col" className="py-1 pr-3">
                Element
              </th>
              <th scope="col" className="py-1 pr-3">
                Kind
              </th>
              <th scope="col" className="py-1 pr-3">
                Name
              </th>
              <th scope="col" className="py-1">
                Data
              </th>
            </tr>
          </thead>
          <tbody>
            {diagram.nodes.map(({ id, element, lines }) => (
              <tr key={id} className="border-b border-rule">
                <th scope="row" className="py-1 pr-3 font-semibold">
                  {id}
                </th>
                <td className="py-1 pr-3">{elementKinds[element.kind].label}</td>
                <td className="py-1 pr-3">{element.label}</td>
                <td className="py-1">{lines.join(", ")}</td>
              </tr>
            ))}
          </tbody>
        </table>
        <table className="mt-3 w-full border-collapse text-left">
          <caption className="sr-only">Conductors of the map</caption>
          <thead>
            <tr className="border-b border-rule-strong">
              <th scope="col" className="py-1 pr-3">
                Conductor
              </th>
              <th scope="col" className="py-1 pr-3">
                From
              </th>
              <th scope="col" className="py-1 pr-3">
                To
              </th>
              <th scope="col" className="py-1 pr-3">
                Is
              </th>
              <th scope="col" className="py-1 pr-3">
                Cross-section
              </th>
              {live.size > 0 && (
                <th scope="col" className="py-1">
                  With every switch off
                </th>
              )}
            </tr>
          </thead>
          <tbody>
            {diagram.wires.map(({ id, role, from, to }) => (
              <tr key={id} className="border-b border-rule">
                <th scope="row" className="py-1 pr-3 font-semibold">
                  {id}
                </th>
                <td className="py-1 pr-3">{from}</td>
                <td className="py-1 pr-3">{to}</td>
                <td className="py-1 pr-3">{roleWord[role]}</td>
                <td className="py-1 pr-3">{areaText(map, id)}</td>
                {live.size > 0 && <td className="py-1">{live.has(id) ? "live" : "not live"}</td>}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  );
}

function areaText(map: EnergyMap, id: string): string {
  const area = map.conductors.find((each) => each.id === id)?.area ?? null;
  if (area === null) return "not known";
  return "mm2" in area ? `${area.mm2} mm²` : `AWG ${area.awg}`;
}
