import { UserRoundCheck } from "lucide-react";
import { ConfirmDialog } from "~/components/ui/confirm-dialog";
import { SelectField } from "~/components/ui/select-field";
import { Sheet } from "~/components/ui/sheet";

/** For a steward: gives a unit whose builder has left to another one. */
export function HandOverPanel({
  unit,
  builder,
  candidates,
}: {
  unit: { number: number; version: number };
  builder: string;
  candidates: readonly { id: number; name: string }[];
}) {
  return (
    <Sheet title="Its builder has left">
      <p className="mb-3">
        {builder} no longer builds in this workshop, so nobody can edit this unit, answer its findings or
        submit it.
      </p>
      {candidates.length === 0 ? (
        <p className="text-ink-soft">
          There is nobody to give it to: a builder is needed who never had it on the bench. Invite one, or
          give somebody the role.
        </p>
      ) : (
        <ConfirmDialog
          trigger="Hand it over"
          triggerVariant="secondary"
          triggerIcon={UserRoundCheck}
          title={`Hand unit ${unit.number} over?`}
          confirm="Hand over"
          confirmVariant="primary"
          fields={{ intent: "hand-over", version: String(unit.version) }}
        >
          <SelectField
            field={{ name: "to", id: "hand-over-to" }}
            label="To which builder"
            placeholder="Choose"
            required
            options={candidates.map(({ id, name }) => ({ value: String(id), label: name }))}
          />
          <p>The new builder answers for the unit from then on. Neither of the two can inspect or sign it.</p>
        </ConfirmDialog>
      )}
    </Sheet>
  );
}
