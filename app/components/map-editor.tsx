/**
 * The energy map as rows to edit, with its drawing and the engine's answers beside them, computed in the browser while
 * the builder types. It saves itself; see use-map-draft.
 */
import { Download, Redo2, Undo2 } from "lucide-react";
import { useCallback, useDeferredValue, useEffect, useMemo, useState } from "react";
import { useBlocker } from "react-router";
import { analyse } from "~/engine/analyse";
import type { Statement } from "~/engine/analysis";
import { elementKinds } from "~/engine/elements";
import type { ElementKind } from "~/engine/energy-map";
import type { Problem } from "~/engine/problem";
import type { RuleSet } from "~/engine/rule-set";
import type { UnitFacts } from "~/engine/unit-facts";
import { AddConductor, ConductorRow, focusSoon } from "./map-editor-conductor";
import { ElementRow } from "./map-editor-element";
import { isTaken, nextElementId, nextId } from "./map-editor-state";
import { AddElement } from "./map-add-element";
import { ConfirmFigures } from "./map-confirm-figures";
import { MapDiagram } from "./map-diagram";
import { KeptNotice } from "./map-kept-notice";
import { ProblemList } from "./map-problem-list";
import { MapConflict, MapSaveLine } from "./map-save-line";
import { ImportButton, MapStart } from "./map-start";
import { StatementList } from "./statement-list";
import { useMapDraft, type MapDraftOptions } from "./use-map-draft";
import { Button } from "./ui/button";
import { IconButton } from "./ui/icon-button";
import { Sheet } from "./ui/sheet";

export interface MapEditorProps extends MapDraftOptions {
  facts: UnitFacts;
  ruleSet: RuleSet;
  /** Name of the exported file, without its ending. */
  exportName: string;
  /** Leads on once everything is saved. */
  onContinue: () => void;
}

const noProblems: readonly Problem[] = [];

export function MapEditor({ facts, ruleSet, exportName, onContinue, ...draftOptions }: MapEditorProps) {
  const draft = useMapDraft(draftOptions);
  const { state, act, save } = draft;
  const { map } = state;
  const [open, setOpen] = useState<ReadonlySet<string>>(new Set());
  const [begun, setBegun] = useState(map.elements.length > 0);
  const [target, setTarget] = useState<{ id: string; field: string | null } | null>(null);
  const [pointed, setPointed] = useState<Statement | null>(null);

  // The rows answer at once; the drawing and the engine follow when the browser has a moment.
  const deferred = useDeferredValue(map);
  const analysis = useMemo(() => analyse(deferred, ruleSet, facts), [deferred, ruleSet, facts]);
  const problems = useMemo(() => byRow(analysis.problems), [analysis.problems]);
  const sources = useMemo(
    () =>
      map.elements
        .filter((element) => ["source", "change"].includes(elementKinds[element.kind].group))
        .map((element) => element.id),
    [map.elements],
  );
  const taken = useCallback((id: string) => isTaken(map, id), [map]);
  const toggle = useCallback((id: string) => setOpen((before) => toggled(before, id)), []);

  const unsaved = save.kind === "unsaved" || save.kind === "saving";
  useSaveBeforeLeaving(unsaved, draft.flush);

  const jumpTo = useCallback((id: string, field: string | null = null) => {
    setOpen((before) => new Set(before).add(id));
    setTarget({ id, field });
  }, []);

  // After the rendering in which the row has opened: before it the field isn't there.
  useEffect(() => {
    if (target) focusRow(target.id, target.field);
  }, [target]);

  useEffect(() => {
    const named = /^#(?:element|conductor)-([A-Za-z0-9_-]{1,16}?)(?:-([A-Za-z][A-Za-z0-9]*))?$/.exec(
      location.hash,
    );
    if (named?.[1]) jumpTo(named[1], named[2] ?? null);
  }, [jumpTo]);

  function addElement(kind: ElementKind) {
    const id = nextElementId(map, kind);
    act({ type: "add-element", kind, id });
    setOpen((before) => new Set(before).add(id));
    focusSoon(`element-${id}-label`);
  }

  if (!begun && map.elements.length === 0) {
    return (
      <div className="space-y-4">
        <KeptNotice draft={draft} onTaken={() => setBegun(true)} />
        <MapStart
          onStart={(started, what) => {
            act({ type: "replace", map: started, what });
            setBegun(true);
          }}
          onBlank={() => setBegun(true)}
        />
      </div>
    );
  }

  const lastStep = state.past.at(-1);
  const blocking = analysis.problems.filter((problem) => problem.blocking);
  return (
    <div
      className="grid items-start gap-5 xl:grid-cols-[minmax(0,1fr)_22rem]"
      onKeyDown={(event) => {
        // Inside a text field the keys belong to the text.
        if (!(event.ctrlKey || event.metaKey) || event.key.toLowerCase() !== "z") return;
        if (event.target instanceof HTMLInputElement || event.target instanceof HTMLTextAreaElement) return;
        event.preventDefault();
        act({ type: event.shiftKey ? "redo" : "undo" });
      }}
    >
      {map.elements.length > 0 ? (
        <Sheet title="Drawing" className="xl:col-span-2" flush>
          <div className="max-h-[60dvh] overflow-y-auto p-3">
            <MapDiagram map={deferred} analysis={analysis} highlight={pointed} />
          </div>
        </Sheet>
      ) : null}
      <div className="min-w-0 space-y-4">
        <KeptNotice draft={draft} onTaken={() => setBegun(true)} />
        {save.kind === "conflict" ? <MapConflict message={save.message} onChoose={draft.choose} /> : null}
        <div className="sticky top-0 z-10 flex flex-wrap items-center justify-between gap-2 border border-rule bg-sheet px-3 py-2">
          <div className="min-w-0">
            <MapSaveLine state={save} />
            {/* On a wide page the answers stand beside the rows; on a narrow one they are far below. */}
            <a href="#engine-says" className="text-link text-sm xl:hidden">
              {summaryWords(blocking.length, analysis.statements)}
            </a>
          </div>
          <div className="flex flex-wrap items-center gap-2">
            <IconButton
              icon={Undo2}
              disabled={!lastStep}
              label={lastStep ? `Undo: ${lastStep.what}` : "Undo"}
              onClick={() => act({ type: "undo" })}
            />
            <IconButton
              icon={Redo2}
              disabled={state.future.length === 0}
              label="Redo"
              onClick={() => act({ type: "redo" })}
            />
            <Button
              type="button"
              variant="primary"
              onClick={async () => {
                await draft.flush();
                onContinue();
              }}
            >
              Review and submit
            </Button>
          </div>
        </div>
        <p role="status" className="sr-only">
          {lastStep?.what}
        </p>

        <Sheet
          title={`Elements (${map.elements.length})`}
          lead="Where energy comes from, what it passes and where it ends."
          flush
        >
          <ConfirmFigures
            count={map.elements.filter((element) => element.example).length}
            onConfirm={() => act({ type: "confirm-figures", id: null })}
          />
          {map.elements.length === 0 ? (
            <p className="px-4 py-4 text-ink-soft">No element yet. Begin with where the energy enters.</p>
          ) : (
            <ol>
              {map.elements.map((element) => (
                <ElementRow
                  key={element.id}
                  element={element}
                  open={open.has(element.id)}
                  problems={problems.get(element.id) ?? noProblems}
                  sources={sources}
                  taken={taken}
                  onToggle={toggle}
                  onAct={act}
                  onDuplicate={(original) => {
                    const as = nextElementId(map, original.kind);
                    act({ type: "duplicate", subject: "element", id: original.id, as });
                    setOpen((before) => new Set(before).add(as));
                    focusSoon(`element-${as}-label`);
                  }}
                />
              ))}
            </ol>
          )}
          <AddElement onAdd={addElement} />
        </Sheet>

        <Sheet
          title={`Connections (${map.conductors.length})`}
          lead="Each conductor from terminal to terminal, with what limits its current."
          flush
        >
          <ol>
            {map.conductors.map((conductor) => (
              <ConductorRow
                key={conductor.id}
                conductor={conductor}
                elements={map.elements}
                problems={problems.get(conductor.id) ?? noProblems}
                taken={taken}
                onAct={act}
                onDuplicate={(original) => {
                  const as = nextId(map, "W");
                  act({ type: "duplicate", subject: "conductor", id: original.id, as });
                  focusSoon(`conductor-${as}-from`);
                }}
              />
            ))}
          </ol>
          <AddConductor map={map} onAct={act} />
        </Sheet>

        <div className="flex flex-wrap gap-2">
          <ImportButton
            onImport={(imported) => act({ type: "replace", map: imported, what: "Imported a map" })}
          />
          <Button
            type="button"
            icon={Download}
            onClick={() => exportMap(JSON.stringify(map, null, 2), exportName)}
          >
            Export JSON
          </Button>
        </div>
        <details className="border border-rule bg-sheet px-4 py-3">
          <summary className="font-medium">Begin again from a starter</summary>
          <div className="pt-3">
            <MapStart onStart={(started, what) => act({ type: "replace", map: started, what })} />
          </div>
        </details>
      </div>

      <div className="min-w-0 space-y-4 xl:sticky xl:top-4 xl:max-h-[calc(100dvh-2rem)] xl:overflow-y-auto">
        <Sheet
          title={
            blocking.length === 0
              ? "Nothing stands against submitting"
              : `Before submitting: ${blocking.length}`
          }
          lead={
            blocking.length === 0
              ? "The map is complete. What the engine says of it is below; the bench decides."
              : "The map can be submitted once these are filled in or put right."
          }
        >
          <ProblemList problems={analysis.problems} onJump={jumpTo} />
        </Sheet>
        <Sheet
          id="engine-says"
          title="What the engine says"
          lead={`Computed from this map by “${ruleSet.title}”. It advises; measuring and local codes decide.`}
        >
          <StatementList statements={analysis.statements} onPoint={setPointed} onJump={(id) => jumpTo(id)} />
        </Sheet>
      </div>
    </div>
  );
}

/** Stays on the page until what was typed is on the server; when it can't be reached, the browser keeps it. */
function useSaveBeforeLeaving(unsaved: boolean, flush: () => Promise<boolean>) {
  const blocker = useBlocker(
    ({ currentLocation, nextLocation }) => unsaved && currentLocation.pathname !== nextLocation.pathname,
  );
  useEffect(() => {
    if (blocker.state !== "blocked") return;
    void flush().then(() => blocker.proceed());
  }, [blocker, flush]);
}

/** What is wrong in a few words: "3 to fill in · 1 danger · 2 unknown". */
function summaryWords(missing: number, statements: readonly Statement[]): string {
  const count = (level: Statement["level"]) =>
    statements.filter((statement) => statement.level === level).length;
  const parts = [
    [missing, "to fill in"],
    [count("danger"), "danger"],
    [count("defect"), "defect"],
    [count("unknown"), "unknown"],
  ] as const;
  const shown = parts.filter(([number]) => number > 0).map(([number, word]) => `${number} ${word}`);
  return shown.length > 0 ? shown.join(" · ") : "What the engine says";
}

function byRow(problems: readonly Problem[]): Map<string, Problem[]> {
  const rows = new Map<string, Problem[]>();
  for (const problem of problems) {
    if (!problem.subject) continue;
    const row = rows.get(problem.subject.id);
    if (row) row.push(problem);
    else rows.set(problem.subject.id, [problem]);
  }
  return rows;
}

function toggled(open: ReadonlySet<string>, id: string): ReadonlySet<string> {
  const next = new Set(open);
  if (!next.delete(id)) next.add(id);
  return next;
}

/** Looks for the field, then for the row itself; a row may be an element's or a connection's. */
function focusRow(id: string, field: string | null) {
  const ids = [
    ...(field === null ? [] : [`element-${id}-${field}`, `conductor-${id}-${field}`]),
    `element-${id}-open`,
    `conductor-${id}-from`,
  ];
  const element = ids.map((each) => document.getElementById(each)).find((each) => each !== null);
  element?.focus();
  element?.scrollIntoView({ block: "center" });
}

function exportMap(json: string, name: string) {
  const url = URL.createObjectURL(new Blob([json], { type: "application/json" }));
  const link = document.createElement("a");
  link.href = url;
  link.download = `${name}.json`;
  link.click();
  URL.revokeObjectURL(url);
}
