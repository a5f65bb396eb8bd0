/** One element of the map as a row: a line that tells what is known, and the fields when it is open. */
import { Check, ChevronDown, ChevronRight, ChevronUp, Copy, Trash2, TriangleAlert } from "lucide-react";
import { memo, type KeyboardEvent } from "react";
import { elementKinds, type FieldDescriptor } from "~/engine/elements";
import { elementSchema, idSchema, type Element } from "~/engine/energy-map";
import type { Problem } from "~/engine/problem";
import { ChoiceCell, EditorField, remarkOf, TextCell } from "./map-editor-field";
import type { EditorAction } from "./map-editor-state";
import { Button } from "./ui/button";
import { IconButton } from "./ui/icon-button";

export interface ElementRowProps {
  element: Element;
  open: boolean;
  problems: readonly Problem[];
  /** Ids of the elements that can feed a relay's coil. */
  sources: readonly string[];
  taken: (id: string) => boolean;
  onToggle: (id: string) => void;
  onAct: (action: EditorAction) => void;
  onDuplicate: (element: Element) => void;
}

export const ElementRow = memo(function ElementRow({
  element,
  open,
  problems,
  sources,
  taken,
  onToggle,
  onAct,
  onDuplicate,
}: ElementRowProps) {
  const kind = elementKinds[element.kind];
  const { id } = element;
  const bodyId = `element-${id}-fields`;
  const blocking = problems.filter((problem) => problem.blocking).length;
  const fields = fieldsOf(element);
  const data: Record<string, unknown> = { ...element };

  function move(event: KeyboardEvent) {
    if (!event.altKey || (event.key !== "ArrowUp" && event.key !== "ArrowDown")) return;
    event.preventDefault();
    onAct({ type: "move", subject: "element", id, by: event.key === "ArrowUp" ? -1 : 1 });
  }

  return (
    <li id={`element-${id}`} className="border-b border-rule" onKeyDown={move}>
      <div className="flex items-center gap-1 pr-1">
        <button
          type="button"
          id={`element-${id}-open`}
          aria-expanded={open}
          aria-controls={bodyId}
          onClick={() => onToggle(id)}
          className="flex min-h-11 min-w-0 flex-1 items-center gap-2 px-2 py-1.5 text-left hover:bg-inset focus-visible:-outline-offset-2"
        >
          {open ? (
            <ChevronDown aria-hidden size={18} className="shrink-0 text-ink-soft" />
          ) : (
            <ChevronRight aria-hidden size={18} className="shrink-0 text-ink-soft" />
          )}
          <span className="w-11 shrink-0 font-mono text-sm font-semibold">{id}</span>
          <span className="min-w-0 flex-1">
            <span className="font-medium">
              {element.label || <span className="text-ink-soft italic">no name</span>}
            </span>
            <span className="text-sm text-ink-soft"> · {kind.label}</span>
            {element.example ? (
              <span className="ml-2 inline-block border border-defect px-1.5 text-sm font-medium text-defect">
                example figures
              </span>
            ) : null}
            <span className="block truncate text-sm text-ink-soft tabular-nums">
              {summaryOf(data, fields)}
            </span>
          </span>
          {blocking > 0 ? (
            <span className="inline-flex shrink-0 items-center gap-1 text-sm font-medium text-defect">
              <TriangleAlert aria-hidden size={16} />
              {blocking}
              <span className="sr-only"> to be filled in</span>
            </span>
          ) : null}
        </button>
        <span className="hidden sm:flex">
          <IconButton
            icon={ChevronUp}
            label={`Move ${id} up`}
            onClick={() => onAct({ type: "move", subject: "element", id, by: -1 })}
          />
          <IconButton
            icon={ChevronDown}
            label={`Move ${id} down`}
            onClick={() => onAct({ type: "move", subject: "element", id, by: 1 })}
          />
        </span>
        <IconButton icon={Copy} label={`Duplicate ${id}`} onClick={() => onDuplicate(element)} />
        <IconButton
          icon={Trash2}
          label={`Remove ${id}`}
          onClick={() => onAct({ type: "remove", subject: "element", id })}
        />
      </div>
      {open ? (
        <div id={bodyId} className="border-t border-rule bg-inset/50 px-3 pt-2 pb-4">
          <p className="mb-2 text-sm text-ink-soft">{kind.hint}</p>
          {element.example ? (
            <div className="mb-3 flex flex-wrap items-center gap-3">
              <p className="text-sm font-medium text-defect">
                These are the starter’s example figures. Enter what is marked on your part, or confirm that
                they are the same.
              </p>
              <Button
                type="button"
                icon={Check}
                aria-label={`These are my part’s figures: ${id}`}
                onClick={() => onAct({ type: "confirm-figures", id })}
              >
                These are my part’s figures
              </Button>
            </div>
          ) : null}
          <div className="grid grid-cols-2 items-start gap-x-3 gap-y-3 sm:grid-cols-[repeat(auto-fill,minmax(10.5rem,1fr))]">
            <TextCell
              id={`element-${id}-id`}
              label="Id"
              hint="Short, as on a drawing: F1."
              remark={remarkOf(of(problems, "id"), false)}
              value={id}
              commitOnBlur
              check={(text) => idProblem(text, id, taken)}
              onChange={(to) => onAct({ type: "rename", subject: "element", id, to })}
            />
            <TextCell
              id={`element-${id}-label`}
              label="Name"
              hint="What it is in this unit, in your words."
              remark={remarkOf(of(problems, "label"), element.label === "")}
              value={element.label}
              check={(text) => (text.length > 80 ? "At most 80 characters." : null)}
              onChange={(value) => onAct({ type: "change-element", id, field: "label", value })}
            />
            {fields.map((field) =>
              field.name === "coilFedBy" ? (
                <ChoiceCell
                  key={field.name}
                  id={`element-${id}-${field.name}`}
                  label={field.label}
                  hint={field.hint}
                  remark={remarkOf(of(problems, field.name), data[field.name] === null)}
                  value={typeof data[field.name] === "string" ? String(data[field.name]) : ""}
                  choices={[
                    { value: "", label: "Not known, or no relay" },
                    ...withPresent(sources, data[field.name]).map((source) => ({
                      value: source,
                      label: source,
                    })),
                  ]}
                  onChange={(value) =>
                    onAct({
                      type: "change-element",
                      id,
                      field: field.name,
                      value: value === "" ? null : value,
                    })
                  }
                />
              ) : (
                <EditorField
                  key={field.name}
                  id={`element-${id}-${field.name}`}
                  descriptor={field}
                  value={data[field.name]}
                  problems={of(problems, field.name)}
                  check={(value) => fieldProblem(element, field.name, value)}
                  onChange={(value) => onAct({ type: "change-element", id, field: field.name, value })}
                />
              ),
            )}
          </div>
          <ul className="mt-2 space-y-1 text-sm text-defect">
            {of(problems, null).map((problem) => (
              <li key={problem.text} className={problem.blocking ? "font-medium" : "text-ink-soft"}>
                {problem.text}
              </li>
            ))}
          </ul>
        </div>
      ) : null}
    </li>
  );
});

/** The fields that make sense for this very element: a switch moved by hand has no coil. */
function fieldsOf(element: Element): FieldDescriptor[] {
  const fields: FieldDescriptor[] = elementKinds[element.kind].fields;
  return element.kind === "switch" && element.actuator === "hand"
    ? fields.filter((field) => field.name !== "coilFedBy")
    : fields;
}

function of(problems: readonly Problem[], field: string | null): Problem[] {
  return problems.filter((problem) => problem.field === field);
}

function withPresent(sources: readonly string[], present: unknown): string[] {
  return typeof present === "string" && !sources.includes(present) ? [...sources, present] : [...sources];
}

/** Why an id can't be given to this row; null when it can. */
export function idProblem(text: string, own: string, taken: (id: string) => boolean): string | null {
  const parsed = idSchema.safeParse(text);
  if (!parsed.success) return parsed.error.issues[0]?.message ?? "This is no id.";
  return text !== own && taken(text) ? `${text} is taken.` : null;
}

function fieldProblem(element: Element, field: string, value: unknown): string | null {
  const parsed = elementSchema.safeParse({ ...element, [field]: value });
  if (parsed.success) return null;
  return parsed.error.issues.find((issue) => issue.path[0] === field)?.message ?? null;
}

/** The known data in a line: "Blade, ISO 8820-3 · 5 A · 32 V"; what is not known is counted. */
function summaryOf(data: Record<string, unknown>, fields: readonly FieldDescriptor[]): string {
  const known: string[] = [];
  let unknown = 0;
  for (const field of fields) {
    const value = data[field.name];
    if (value === null || value === "unknown") unknown++;
    else if (field.type === "choice" && (value === "yes" || value === "no"))
      known.push(`${field.label.toLowerCase()}: ${value}`);
    else if (field.type === "choice")
      known.push(field.choices?.find((choice) => choice.value === value)?.label ?? String(value));
    else
      known.push(
        field.unit ? `${String(value)} ${field.unit}` : `${field.label.toLowerCase()} ${String(value)}`,
      );
  }
  return [...(unknown > 0 ? [`${unknown} not known`] : []), ...known].join(" · ");
}
