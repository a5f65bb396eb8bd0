/** Says whether what was typed is on the server, and lets a person decide where two versions met. */
import { CloudAlert, CloudCheck, CloudUpload } from "lucide-react";
import type { SaveState } from "./map-saver";
import { Button } from "./ui/button";
import { Time } from "./ui/time";

export function MapSaveLine({ state }: { state: SaveState }) {
  const Icon =
    state.kind === "saved"
      ? CloudCheck
      : state.kind === "saving" || state.kind === "unsaved"
        ? CloudUpload
        : CloudAlert;
  const trouble = state.kind === "retrying" || state.kind === "refused" || state.kind === "conflict";
  return (
    <p
      role="status"
      data-save={state.kind}
      className={`flex items-center gap-2 text-sm ${trouble ? "font-medium text-fail" : "text-ink-soft"}`}
    >
      <Icon aria-hidden size={17} className="shrink-0" />
      <span>{words(state)}</span>
    </p>
  );
}

function words(state: SaveState) {
  switch (state.kind) {
    case "saved":
      return state.at === null ? (
        "Everything is saved"
      ) : (
        <>
          Saved <Time at={state.at} style="date-time" />
        </>
      );
    case "unsaved":
      return "Not saved yet";
    case "saving":
      return "Saving";
    case "retrying":
      return `Not saved, trying again. ${state.message} What you type stays on this device meanwhile.`;
    case "conflict":
      return "Not saved: the map was changed elsewhere";
    case "refused":
      return (
        <>
          {`Not saved. ${state.message} What you typed is still on this device.`}
          {state.signedOut ? (
            <>
              {" "}
              <a href="/sign-in" target="_blank" rel="noreferrer" className="text-link">
                Sign in in a new tab
              </a>
              , then load this page again.
            </>
          ) : null}
        </>
      );
  }
}

export function MapConflict({
  message,
  onChoose,
}: {
  message: string;
  onChoose: (choice: "mine" | "theirs") => void;
}) {
  return (
    <div role="alert" className="space-y-3 border-l-4 border-undecided bg-undecided-wash px-4 py-3">
      <p className="font-semibold">This map was changed in two places</p>
      <p>
        {message} Nothing is lost: keep what you see here, or take the other version and find yours one step
        back.
      </p>
      <div className="flex flex-wrap gap-2">
        <Button type="button" onClick={() => onChoose("mine")}>
          Keep mine
        </Button>
        <Button type="button" onClick={() => onChoose("theirs")}>
          See theirs
        </Button>
      </div>
    </div>
  );
}
