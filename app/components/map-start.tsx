/** Ways to begin a map: one of the starters, a map from elsewhere as JSON, or an empty one. */
import { FileJson, Plus } from "lucide-react";
import { useId, useState } from "react";
import type { EnergyMap } from "~/engine/energy-map";
import { starterMaps } from "~/engine/starter-maps";
import { EnergyDiagram } from "./energy-diagram";
import { asExample } from "./map-editor-state";
import { importMap } from "./map-import";
import { Button } from "./ui/button";
import { Dialog } from "./ui/dialog";

export interface MapStartProps {
  onStart: (map: EnergyMap, what: string) => void;
  onBlank?: () => void;
}

/** Cards with a small drawing each. */
export function MapStart({ onStart, onBlank }: MapStartProps) {
  return (
    <div className="space-y-4">
      <p className="max-w-prose">
        Begin with the starter that comes closest and change it to what you built. Its figures are examples:
        replace every one by what is marked on your parts, and mark as not known what you don’t know. Until
        you have entered or confirmed those of a part, the map can’t be submitted.
      </p>
      <ul className="grid gap-3 sm:grid-cols-2 xl:grid-cols-3">
        {starterMaps.map((starter) => (
          <li key={starter.key}>
            <button
              type="button"
              onClick={() => onStart(asExample(starter.map), `Started from “${starter.title}”`)}
              className="flex h-full w-full flex-col border border-rule-strong bg-sheet text-left hover:border-copper hover:bg-copper-wash/40"
            >
              <span
                aria-hidden
                className="flex h-44 w-full items-center justify-center overflow-hidden border-b border-rule bg-paper p-2"
              >
                <EnergyDiagram map={starter.map} tiny />
              </span>
              <span className="block p-3">
                <span className="block font-semibold">{starter.title}</span>
                <span className="block text-sm text-ink-soft">{starter.description}</span>
              </span>
            </button>
          </li>
        ))}
      </ul>
      <div className="flex flex-wrap gap-2">
        <ImportButton onImport={(map) => onStart(map, "Imported a map")} />
        {onBlank ? (
          <Button type="button" icon={Plus} onClick={onBlank}>
            Begin with an empty map
          </Button>
        ) : null}
      </div>
    </div>
  );
}

export function ImportButton({ onImport }: { onImport: (map: EnergyMap) => void }) {
  const [open, setOpen] = useState(false);
  const [text, setText] = useState("");
  const [errors, setErrors] = useState<string[]>([]);
  const id = useId();

  function read() {
    const result = importMap(text);
    if (!result.ok) return setErrors(result.errors);
    setErrors([]);
    setText("");
    setOpen(false);
    onImport(result.map);
  }

  return (
    <>
      <Button type="button" icon={FileJson} onClick={() => setOpen(true)}>
        Import JSON
      </Button>
      <Dialog
        open={open}
        onClose={() => setOpen(false)}
        title="Import a map"
        wide
        footer={
          <>
            <Button type="button" onClick={() => setOpen(false)}>
              Cancel
            </Button>
            <Button type="button" variant="primary" onClick={read}>
              Import
            </Button>
          </>
        }
      >
        <div className="space-y-4">
          <div>
            <label htmlFor={`${id}-file`} className="block text-sm font-medium">
              From a file
            </label>
            <input
              id={`${id}-file`}
              type="file"
              accept="application/json,.json"
              className="control-box mt-1 border-dashed text-sm file:mr-4 file:min-h-10 file:border-0 file:border-r file:border-rule-strong file:bg-inset file:px-4 file:font-semibold file:text-ink"
              onChange={(event) => {
                const file = event.currentTarget.files?.[0];
                if (!file) return;
                if (file.size > 1_000_000)
                  return setErrors(["The file is too large for a map: at most 1 MB."]);
                void file.text().then((read) => {
                  setText(read);
                  setErrors([]);
                });
              }}
            />
          </div>
          <div>
            <label htmlFor={`${id}-text`} className="block text-sm font-medium">
              Or paste it here
            </label>
            <p id={`${id}-hint`} className="text-sm text-ink-soft">
              An energy map after the{" "}
              <a href="/api/energy-map.schema.json" target="_blank" rel="noreferrer" className="text-link">
                published JSON Schema
              </a>
              . It takes the place of what is in the editor; one step back brings that again.
            </p>
            <textarea
              id={`${id}-text`}
              rows={10}
              spellCheck={false}
              aria-describedby={`${id}-hint${errors.length > 0 ? ` ${id}-errors` : ""}`}
              aria-invalid={errors.length > 0 || undefined}
              value={text}
              onChange={(event) => setText(event.currentTarget.value)}
              className="control-box mt-1 px-3 py-2 font-mono text-sm"
            />
          </div>
          {errors.length > 0 ? (
            <div
              id={`${id}-errors`}
              role="alert"
              className="border-l-4 border-fail bg-fail-wash px-4 py-3 text-sm"
            >
              <p className="font-semibold text-fail">Nothing was imported</p>
              <ul className="list-disc pl-5">
                {errors.map((error) => (
                  <li key={error} className="break-words">
                    {error}
                  </li>
                ))}
              </ul>
            </div>
          ) : null}
        </div>
      </Dialog>
    </>
  );
}
