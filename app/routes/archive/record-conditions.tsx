import { Day } from "~/components/ui/time";
import { TitleBlock } from "~/components/ui/title-block";

interface Conditions {
  place: string;
  supply: string;
  load: string;
  supervision: string;
  other: string;
}

/** Under which conditions the unit may be used, and until when. */
export function RecordConditions({
  conditions,
  recheckOn,
}: {
  conditions: Conditions;
  recheckOn: string | null;
}) {
  const told = (text: string) => (text.trim() === "" ? "no condition" : text);
  return (
    <TitleBlock
      columns={3}
      items={[
        { label: "Place", value: told(conditions.place) },
        { label: "Supply", value: told(conditions.supply) },
        { label: "Load", value: told(conditions.load) },
        { label: "Supervision", value: told(conditions.supervision) },
        { label: "Other", value: told(conditions.other) },
        { label: "Recheck by", value: <Day on={recheckOn} />, numeric: true },
      ]}
    />
  );
}
