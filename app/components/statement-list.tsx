/**
 * What the engine found out, the worst first, grouped by what it is about. Pointing at a statement (or focusing it) lets
 * a diagram highlight what it names; the names themselves can lead to their rows.
 *   <StatementList statements={analysis.statements} onPoint={setPointed} onJump={(id) => jumpTo(id)} />
 */
import type { Statement, StatementFamily, StatementLevel } from "~/engine/analysis";
import { SeverityBadge } from "./ui/severity-badge";

export interface StatementListProps {
  statements: readonly Statement[];
  /** Called with the statement under pointer or focus, and null after it. */
  onPoint?: (statement: Statement | null) => void;
  /** Makes the named parts buttons. */
  onJump?: (id: string) => void;
  /** Shows only these families. */
  families?: readonly StatementFamily[];
  /** h3 unless told. */
  headingLevel?: 3 | 4;
}

export const familyTitles: Record<StatementFamily, string> = {
  isolation: "Isolation",
  reverse: "Reverse current",
  fusing: "Fusing",
  insulation: "Insulation",
  "protective-earth": "Protective earth",
  leakage: "Leakage",
  "stored-charge": "Stored charge",
  battery: "Battery",
};

const order: StatementLevel[] = ["danger", "defect", "unknown", "caution", "good"];

/** Worst first; what is unknown stands before what is merely to be minded. */
export function byLevel(a: Statement, b: Statement): number {
  return order.indexOf(a.level) - order.indexOf(b.level);
}

export function StatementList({
  statements,
  onPoint,
  onJump,
  families,
  headingLevel = 3,
}: StatementListProps) {
  const Heading = `h${headingLevel}` as const;
  const all = Object.keys(familyTitles) as StatementFamily[];
  const groups = all
    .filter((family) => !families || families.includes(family))
    .map((family) => ({
      family,
      rows: statements.filter((statement) => statement.family === family).sort(byLevel),
    }))
    .filter((group) => group.rows.length > 0)
    .sort((a, b) => worst(a.rows) - worst(b.rows));
  if (groups.length === 0) {
    return <p className="text-sm text-ink-soft">Nothing can be said of this map yet.</p>;
  }
  return (
    <div className="space-y-4">
      {groups.map(({ family, rows }) => (
        <section key={family}>
          <Heading className="legend-text mb-1">{familyTitles[family]}</Heading>
          <ul className="divide-y divide-rule border-y border-rule">
            {rows.map((statement) => (
              <li
                key={statement.id}
                className="flex flex-col gap-1 py-2 text-sm hover:bg-inset sm:flex-row sm:gap-3"
                onPointerEnter={onPoint && (() => onPoint(statement))}
                onPointerLeave={onPoint && (() => onPoint(null))}
                onFocus={onPoint && (() => onPoint(statement))}
                onBlur={onPoint && (() => onPoint(null))}
              >
                <span className="shrink-0 sm:w-24">
                  <SeverityBadge severity={statement.level} />
                </span>
                <span className="min-w-0">
                  {statement.text}
                  {onJump ? (
                    <Names ids={[...statement.elements, ...statement.conductors]} onJump={onJump} />
                  ) : null}
                </span>
              </li>
            ))}
          </ul>
        </section>
      ))}
    </div>
  );
}

function worst(rows: readonly Statement[]): number {
  return Math.min(...rows.map((row) => order.indexOf(row.level)));
}

function Names({ ids, onJump }: { ids: string[]; onJump: (id: string) => void }) {
  if (ids.length === 0) return null;
  return (
    <span className="mt-1 flex flex-wrap gap-1 print:hidden">
      {ids.map((id) => (
        <button
          key={id}
          type="button"
          onClick={() => onJump(id)}
          className="min-h-6 rounded-sm border border-rule px-1.5 text-xs font-medium text-copper hover:border-copper pointer-coarse:min-h-9"
        >
          {id}
        </button>
      ))}
    </span>
  );
}
