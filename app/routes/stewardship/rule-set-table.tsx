import { type Column, DataTable } from "~/components/ui/data-table";
import { Sheet } from "~/components/ui/sheet";
import { listRuleValues, type RuleSet, type RuleValue } from "~/engine/rule-set";

/** The limits of a rule set, each with where it comes from and how sure we are of it. */
export function RuleSetTable({ ruleSet }: { ruleSet: RuleSet }) {
  return (
    <Sheet flush title="Limits of the rule set in use" lead={ruleSet.notes.join(" ")}>
      <DataTable
        caption={`Limits of ${ruleSet.title}`}
        rows={listRuleValues(ruleSet)}
        rowKey={({ name }) => name}
        columns={columns}
      />
    </Sheet>
  );
}

const marks: Record<RuleValue["citation"]["mark"], string> = {
  V: "Seen on a public page",
  M: "From memory: check it against your own copy",
  C: "Computed by a stated formula",
};

const columns: Column<{ name: string; value: RuleValue }>[] = [
  { id: "name", header: "Value", primary: true, cell: ({ name }) => words(name) },
  { id: "value", header: "Limit", nowrap: true, cell: ({ value }) => `${value.value} ${value.unit}` },
  {
    id: "source",
    header: "Source",
    cell: ({ value: { citation } }) =>
      `${citation.standard}, ${citation.clause}; edition: ${citation.edition}`,
  },
  { id: "mark", header: "How sure", cell: ({ value: { citation } }) => marks[citation.mark] },
];

/** "protectiveEarth.stepLength" as people would write it: "Protective earth: step length". */
function words(name: string): string {
  const spaced = name
    .replace(/([a-z])([A-Z])/g, "$1 $2")
    .toLowerCase()
    .replace(".", ": ")
    .replace(/\b(ac|dc|elv|i|ii)\b/g, (abbreviation) => abbreviation.toUpperCase())
    .replace("class iheating", "class I heating");
  return spaced.charAt(0).toUpperCase() + spaced.slice(1);
}
