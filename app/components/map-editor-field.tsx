/** One datum of a row of the map editor: number with "not known" beside it, choice, or text. */
import { CircleHelp } from "lucide-react";
import { useState, type ReactNode } from "react";
import type { FieldDescriptor } from "~/engine/elements";
import type { Problem } from "~/engine/problem";
import { parseAmount } from "./parse-amount";

const inputClass =
  "control-box min-h-9 min-w-0 px-2 py-1 text-sm pointer-coarse:min-h-11 pointer-coarse:text-base";

export interface EditorFieldProps {
  /** Of the control; error and hint ids follow from it. */
  id: string;
  descriptor: FieldDescriptor;
  value: unknown;
  problems: readonly Problem[];
  /** Why a value can't be, as a sentence; null when it can. */
  check: (value: unknown) => string | null;
  onChange: (value: unknown) => void;
}

export function EditorField({ id, descriptor, value, problems, check, onChange }: EditorFieldProps) {
  const unknown = value === null || value === "unknown";
  const shared = { id, label: descriptor.label, hint: descriptor.hint, remark: remarkOf(problems, unknown) };
  switch (descriptor.type) {
    case "number":
      return (
        <NumberCell
          {...shared}
          unit={descriptor.unit}
          nullable={descriptor.nullable}
          value={typeof value === "number" ? value : null}
          check={check}
          onChange={onChange}
        />
      );
    case "choice":
      return (
        <ChoiceCell
          {...shared}
          value={typeof value === "string" ? value : ""}
          choices={descriptor.choices ?? []}
          onChange={onChange}
        />
      );
    case "boolean":
      return (
        <ChoiceCell
          {...shared}
          value={value === true ? "yes" : value === false ? "no" : ""}
          choices={[
            { value: "", label: "Not known" },
            { value: "yes", label: "Yes" },
            { value: "no", label: "No" },
          ]}
          onChange={(choice) => onChange(choice === "" ? null : choice === "yes")}
        />
      );
    case "text":
      return (
        <TextCell
          {...shared}
          value={typeof value === "string" ? value : ""}
          check={(text) => check(text === "" && descriptor.nullable ? null : text)}
          onChange={(text) => onChange(text === "" && descriptor.nullable ? null : text)}
        />
      );
  }
}

export interface Remark {
  text: string;
  blocking: boolean;
}

/** The field's own problem in few words: that it isn't known is seen already, only whether it may stay so is news. */
export function remarkOf(problems: readonly Problem[], unknown: boolean): Remark | null {
  const worst = problems.find((problem) => problem.blocking) ?? problems[0];
  if (!worst) return null;
  if (!unknown) return { text: worst.text, blocking: worst.blocking };
  return worst.blocking
    ? { text: "Needed before submitting", blocking: true }
    : { text: "May stay unknown; the bench finds out", blocking: false };
}

interface CellProps {
  id: string;
  label: ReactNode;
  hint?: string;
  remark: Remark | null;
  className?: string;
}

export function NumberCell({
  value,
  unit,
  nullable,
  check,
  onChange,
  ...cell
}: CellProps & {
  value: number | null;
  unit: string | null;
  nullable: boolean;
  check: (value: number) => string | null;
  onChange: (value: number | null) => void;
}) {
  // What is being typed; null while the field shows the map's own value.
  const [draft, setDraft] = useState<string | null>(null);
  const shown = draft ?? (value === null ? "" : String(value));
  const parsed = draft === null || draft.trim() === "" ? null : parseAmount(draft);
  const error =
    draft === null || draft.trim() === "" ? null : parsed === null ? "This is no number." : check(parsed);

  function type(text: string) {
    setDraft(text);
    const amount = parseAmount(text);
    if (amount !== null && check(amount) === null) onChange(amount);
    // A wrong value must not leave the one before it standing unseen.
    else if (nullable) onChange(null);
  }

  return (
    <Cell {...cell} error={error}>
      {(describedBy) => (
        <span className="flex items-stretch">
          <input
            id={cell.id}
            type="text"
            inputMode="decimal"
            autoComplete="off"
            aria-describedby={describedBy}
            aria-invalid={error !== null || undefined}
            placeholder={nullable ? "not known" : undefined}
            value={shown}
            onChange={(event) => type(event.currentTarget.value)}
            onBlur={() => {
              if (error === null) setDraft(null);
            }}
            className={`${inputClass} text-right tabular-nums ${value === null ? "border-dashed placeholder:text-left placeholder:italic" : ""}`}
          />
          {unit ? (
            <span className="flex shrink-0 items-center border border-l-0 border-rule-strong bg-inset px-2 text-sm text-ink-soft">
              {unit}
            </span>
          ) : null}
          {nullable ? (
            <button
              type="button"
              aria-pressed={value === null && error === null}
              title="Not known"
              onClick={() => {
                setDraft(null);
                onChange(null);
              }}
              className="ml-1 inline-flex min-w-7 shrink-0 items-center justify-center rounded-sm border border-rule text-ink-soft hover:border-ink-soft hover:text-ink aria-pressed:border-unknown aria-pressed:border-dashed aria-pressed:bg-unknown-wash aria-pressed:text-unknown pointer-coarse:min-w-11"
            >
              <CircleHelp aria-hidden size={17} />
              <span className="sr-only">{cell.label}: not known</span>
            </button>
          ) : null}
        </span>
      )}
    </Cell>
  );
}

export function ChoiceCell({
  value,
  choices,
  onChange,
  ...cell
}: CellProps & {
  value: string;
  choices: readonly { value: string; label: string }[];
  onChange: (value: string) => void;
}) {
  const unknown = value === "unknown" || value === "";
  return (
    <Cell {...cell} error={null}>
      {(describedBy) => (
        <select
          id={cell.id}
          aria-describedby={describedBy}
          value={value}
          onChange={(event) => onChange(event.currentTarget.value)}
          className={`${inputClass} ${unknown ? "border-dashed text-ink-soft italic" : ""}`}
        >
          {choices.map((choice) => (
            <option key={choice.value} value={choice.value}>
              {choice.label}
            </option>
          ))}
        </select>
      )}
    </Cell>
  );
}

export function TextCell({
  value,
  check,
  onChange,
  commitOnBlur = false,
  ...cell
}: CellProps & {
  value: string;
  check: (value: string) => string | null;
  onChange: (value: string) => void;
  /** For ids: half-typed ones must not be taken. */
  commitOnBlur?: boolean;
}) {
  const [draft, setDraft] = useState<string | null>(null);
  const shown = draft ?? value;
  const error = draft === null ? null : check(draft);
  return (
    <Cell {...cell} error={error}>
      {(describedBy) => (
        <input
          id={cell.id}
          type="text"
          autoComplete="off"
          aria-describedby={describedBy}
          aria-invalid={error !== null || undefined}
          value={shown}
          onChange={(event) => {
            const text = event.currentTarget.value;
            setDraft(text);
            if (!commitOnBlur && check(text) === null) onChange(text);
          }}
          onBlur={() => {
            if (error !== null) return;
            if (commitOnBlur && draft !== null && draft !== value) onChange(draft);
            setDraft(null);
          }}
          onKeyDown={(event) => {
            if (event.key === "Escape") setDraft(null);
            if (event.key === "Enter") event.currentTarget.blur();
          }}
          className={inputClass}
        />
      )}
    </Cell>
  );
}

/** Label above, remark or error below; the hint is told to assistive technology and shown on pointing. */
export function Cell({
  id,
  label,
  hint,
  remark,
  error,
  className = "",
  children,
}: CellProps & { error: string | null; children: (describedBy: string | undefined) => ReactNode }) {
  const described = [error || remark ? `${id}-remark` : null, hint ? `${id}-hint` : null].filter(Boolean);
  return (
    <div className={`min-w-0 ${className}`}>
      <label htmlFor={id} title={hint} className="block truncate text-xs font-medium text-ink-soft">
        {label}
      </label>
      {children(described.length > 0 ? described.join(" ") : undefined)}
      {hint ? (
        <span id={`${id}-hint`} hidden>
          {hint}
        </span>
      ) : null}
      {error ? (
        <p id={`${id}-remark`} role="alert" className="mt-0.5 text-xs font-medium text-fail">
          {error}
        </p>
      ) : remark ? (
        <p
          id={`${id}-remark`}
          className={`mt-0.5 text-xs ${remark.blocking ? "font-medium text-defect" : "text-ink-soft"}`}
        >
          {remark.text}
        </p>
      ) : null}
    </div>
  );
}
