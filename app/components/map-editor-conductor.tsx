/** One connection of the map as a row, and the row by which another one is added. */
import { Copy, Plus, Trash2 } from "lucide-react";
import { memo, useState } from "react";
import { terminalsOf } from "~/engine/elements";
import { conductorSchema, type Conductor, type EnergyMap, type TerminalReference } from "~/engine/energy-map";
import type { Problem } from "~/engine/problem";
import { idProblem } from "./map-editor-element";
import { Cell, ChoiceCell, NumberCell, type Remark, remarkOf, TextCell } from "./map-editor-field";
import { type EditorAction, nameOf, nextId, suggestCircuit } from "./map-editor-state";
import { Button } from "./ui/button";
import { IconButton } from "./ui/icon-button";

const circuits = [
  { value: "mains", label: "Mains" },
  { value: "elv", label: "ELV" },
  { value: "earth", label: "Earth" },
];
const insulations = [
  { value: "unknown", label: "Not known" },
  { value: "pvc", label: "PVC" },
  { value: "rubber", label: "Rubber" },
  { value: "silicone", label: "Silicone" },
  { value: "xlpe", label: "XLPE" },
  { value: "none", label: "None: bare" },
];

/** Two lines a connection: where it leads, then what limits its current; on a phone two fields a line. */
const grid = "grid grid-cols-2 items-start gap-x-1.5 gap-y-2 sm:grid-cols-12";

export interface ConductorRowProps {
  conductor: Conductor;
  /** For the lists of terminals. */
  elements: EnergyMap["elements"];
  problems: readonly Problem[];
  taken: (id: string) => boolean;
  onAct: (action: EditorAction) => void;
  onDuplicate: (conductor: Conductor) => void;
}

export const ConductorRow = memo(function ConductorRow({
  conductor,
  elements,
  problems,
  taken,
  onAct,
  onDuplicate,
}: ConductorRowProps) {
  const { id } = conductor;
  const prefix = `conductor-${id}`;
  const of = (field: string) => problems.filter((problem) => problem.field === field);
  const change = (changes: Partial<Omit<Conductor, "id">>) =>
    onAct({ type: "change-conductor", id, changes });

  return (
    <li
      id={prefix}
      className="flex items-start gap-1 border-b border-rule px-3 py-2"
      onKeyDown={(event) => {
        if (!event.altKey || (event.key !== "ArrowUp" && event.key !== "ArrowDown")) return;
        event.preventDefault();
        onAct({ type: "move", subject: "conductor", id, by: event.key === "ArrowUp" ? -1 : 1 });
      }}
    >
      <div className={`${grid} min-w-0 flex-1`}>
        <TextCell
          id={`${prefix}-id`}
          label="Id"
          className="max-sm:col-span-full sm:col-span-2"
          remark={remarkOf(of("id"), false)}
          value={id}
          commitOnBlur
          check={(text) => idProblem(text, id, taken)}
          onChange={(to) => onAct({ type: "rename", subject: "conductor", id, to })}
        />
        <TerminalCell
          id={`${prefix}-from`}
          label="From"
          className="sm:col-span-5"
          remark={remarkOf(of("from"), false)}
          elements={elements}
          value={conductor.from}
          onChange={(from) => change({ from })}
        />
        <TerminalCell
          id={`${prefix}-to`}
          label="To"
          className="sm:col-span-5"
          remark={remarkOf(of("to"), false)}
          elements={elements}
          value={conductor.to}
          onChange={(to) => change({ to })}
        />
        <ChoiceCell
          id={`${prefix}-circuit`}
          label="Circuit"
          className="sm:col-span-2"
          hint="ELV is extra-low voltage: batteries and the output sides of supplies."
          remark={remarkOf(of("circuit"), false)}
          value={conductor.circuit}
          choices={circuits}
          onChange={(value) => {
            const circuit = circuitOf(value);
            if (circuit) change({ circuit });
          }}
        />
        <AreaCell
          id={`${prefix}-area`}
          area={conductor.area}
          remark={remarkOf(of("area"), conductor.area === null)}
          onChange={(area) => change({ area })}
        />
        <NumberCell
          id={`${prefix}-lengthM`}
          label="Length"
          className="sm:col-span-3"
          unit="m"
          nullable
          remark={remarkOf(of("lengthM"), conductor.lengthM === null)}
          value={conductor.lengthM}
          check={(lengthM) => conductorProblem(conductor, { lengthM })}
          onChange={(lengthM) => change({ lengthM })}
        />
        <ChoiceCell
          id={`${prefix}-insulation`}
          label="Insulation"
          className="sm:col-span-3"
          remark={remarkOf(of("insulation"), conductor.insulation === "unknown")}
          value={conductor.insulation}
          choices={insulations}
          onChange={(value) => {
            const parsed = conductorSchema.shape.insulation.safeParse(value);
            if (parsed.success) change({ insulation: parsed.data });
          }}
        />
      </div>
      <span className="flex flex-col pt-3 sm:flex-row">
        <IconButton icon={Copy} label={`Duplicate ${id}`} onClick={() => onDuplicate(conductor)} />
        <IconButton
          icon={Trash2}
          label={`Remove ${id}`}
          onClick={() => onAct({ type: "remove", subject: "conductor", id })}
        />
      </span>
    </li>
  );
});

function circuitOf(value: string): Conductor["circuit"] | null {
  const parsed = conductorSchema.shape.circuit.safeParse(value);
  return parsed.success ? parsed.data : null;
}

function conductorProblem(conductor: Conductor, changes: Partial<Conductor>): string | null {
  const parsed = conductorSchema.safeParse({ ...conductor, ...changes });
  return parsed.success ? null : (parsed.error.issues[0]?.message ?? "This can't be.");
}

function AreaCell({
  id,
  area,
  remark,
  onChange,
}: {
  id: string;
  area: Conductor["area"];
  remark: Remark | null;
  onChange: (area: Conductor["area"]) => void;
}) {
  const [unit, setUnit] = useState<"mm2" | "awg">(area && "awg" in area ? "awg" : "mm2");
  const shown = area === null ? unit : "awg" in area ? "awg" : "mm2";
  const value = area === null ? null : "awg" in area ? area.awg : area.mm2;
  const make = (amount: number): Conductor["area"] => (shown === "awg" ? { awg: amount } : { mm2: amount });
  return (
    <div className="col-span-2 flex min-w-0 items-start gap-1 sm:col-span-4">
      <NumberCell
        id={id}
        label="Cross-section"
        unit={null}
        nullable
        remark={remark}
        value={value}
        check={(amount) => areaProblem(make(amount))}
        onChange={(amount) => onChange(amount === null ? null : make(amount))}
        className="flex-1"
      />
      <div className="w-15 shrink-0">
        <label htmlFor={`${id}-unit`} className="sr-only">
          Unit of the cross-section
        </label>
        <select
          id={`${id}-unit`}
          value={shown}
          onChange={(event) => {
            setUnit(event.currentTarget.value === "awg" ? "awg" : "mm2");
            // 18 in one unit is nothing like 18 in the other: the number has to be entered anew.
            if (area !== null) onChange(null);
          }}
          className="control-box mt-4 min-h-9 px-1 py-1 text-sm pointer-coarse:min-h-11"
        >
          <option value="mm2">mm²</option>
          <option value="awg">AWG</option>
        </select>
      </div>
    </div>
  );
}

function areaProblem(area: Conductor["area"]): string | null {
  const parsed = conductorSchema.shape.area.safeParse(area);
  if (parsed.success) return null;
  return area && "awg" in area ? "A gauge is a whole number from −3 to 50." : "Above 0, at most 1000 mm².";
}

export function TerminalCell({
  id,
  label,
  remark,
  elements,
  value,
  className,
  onChange,
}: {
  id: string;
  label: string;
  remark: Remark | null;
  className?: string;
  elements: EnergyMap["elements"];
  /** Null: nothing chosen yet. */
  value: TerminalReference | null;
  onChange: (end: TerminalReference) => void;
}) {
  const chosen = value === null ? "" : `${value.element}.${value.terminal}`;
  const known = elements.some(
    (element) =>
      element.id === value?.element &&
      terminalsOf(element).some((terminal) => terminal.name === value.terminal),
  );
  return (
    <Cell id={id} label={label} remark={remark} error={null} className={className}>
      {(describedBy) => (
        <select
          id={id}
          aria-describedby={describedBy}
          value={chosen}
          onChange={(event) => {
            const [element = "", terminal = ""] = event.currentTarget.value.split(".");
            if (terminal) onChange({ element, terminal });
          }}
          className="control-box min-h-9 min-w-0 px-2 py-1 text-sm pointer-coarse:min-h-11"
        >
          {value === null ? <option value="">Choose a terminal</option> : null}
          {value !== null && !known ? <option value={chosen}>{chosen} (not on the map)</option> : null}
          {elements.map((element) => (
            <optgroup key={element.id} label={nameOf(element)}>
              {terminalsOf(element).map((terminal) => (
                <option key={terminal.name} value={`${element.id}.${terminal.name}`}>
                  {element.id} ·{" "}
                  {terminal.name === terminal.label ? terminal.name : `${terminal.name} ${terminal.label}`}
                </option>
              ))}
            </optgroup>
          ))}
        </select>
      )}
    </Cell>
  );
}

/** Both ends and the circuit are chosen before there is a connection; everything else starts as not known. */
export function AddConductor({ map, onAct }: { map: EnergyMap; onAct: (action: EditorAction) => void }) {
  const [from, setFrom] = useState<TerminalReference | null>(null);
  const [to, setTo] = useState<TerminalReference | null>(null);
  const [chosen, setChosen] = useState<Conductor["circuit"] | null>(null);
  const circuit = chosen ?? (from && to ? suggestCircuit(map, from, to) : null);
  const ready = from !== null && to !== null && circuit !== null;

  function add() {
    if (!from || !to || !circuit) return;
    const id = nextId(map, "W");
    onAct({
      type: "add-conductor",
      conductor: { id, from, to, circuit, area: null, lengthM: null, insulation: "unknown" },
    });
    setFrom(null);
    setTo(null);
    setChosen(null);
    focusSoon(`conductor-${id}-area`);
  }

  return (
    <div className="flex flex-wrap items-end gap-2 px-3 py-3">
      <div className="min-w-36 flex-1">
        <TerminalCell
          id="new-conductor-from"
          label="New connection from"
          remark={null}
          elements={map.elements}
          value={from}
          onChange={setFrom}
        />
      </div>
      <div className="min-w-36 flex-1">
        <TerminalCell
          id="new-conductor-to"
          label="to"
          remark={null}
          elements={map.elements}
          value={to}
          onChange={setTo}
        />
      </div>
      <ChoiceCell
        id="new-conductor-circuit"
        label="Circuit"
        remark={null}
        value={circuit ?? ""}
        choices={[{ value: "", label: "Choose" }, ...circuits]}
        onChange={(value) => setChosen(circuitOf(value))}
        className="w-40"
      />
      <Button type="button" icon={Plus} disabled={!ready} onClick={add}>
        Add connection
      </Button>
    </div>
  );
}

/** Focuses what the next rendering will have made. */
export function focusSoon(id: string): void {
  requestAnimationFrame(() => {
    const element = document.getElementById(id);
    element?.focus();
    element?.scrollIntoView({ block: "nearest" });
  });
}
