import type { useMapDraft } from "./use-map-draft";
import { Button } from "./ui/button";
import { Time } from "./ui/time";

/** Offers back what an earlier visit typed and could not save. */
export function KeptNotice({
  draft,
  onTaken,
}: {
  draft: ReturnType<typeof useMapDraft>;
  onTaken: () => void;
}) {
  if (!draft.kept) return null;
  return (
    <div role="alert" className="space-y-3 border-l-4 border-undecided bg-undecided-wash px-4 py-3">
      <p>
        <span className="font-semibold">This device holds changes that did not reach the server</span>, typed{" "}
        <Time at={draft.kept.at} />.
      </p>
      <div className="flex flex-wrap gap-2">
        <Button
          type="button"
          variant="primary"
          onClick={() => {
            draft.decideKept("take");
            onTaken();
          }}
        >
          Bring them back
        </Button>
        <Button type="button" onClick={() => draft.decideKept("drop")}>
          Leave them out
        </Button>
      </div>
    </div>
  );
}
