/**
 * Photos and drawings of something, small; a tap shows one large.
 *   <PhotoStrip files={line.photos} api={`/api/w/${slug}`} unit={unit.number} />
 * With `editable`, captions can be written and files taken back (and brought back at once, if it was a slip).
 */
import { FileText, Trash2, Undo2 } from "lucide-react";
import { useState } from "react";
import { useRevalidator } from "react-router";
import { apiRequest } from "./api-request";
import { Button } from "./ui/button";
import { PhotoGrid, PhotoThumb } from "./ui/photo-thumb";
import { Time } from "./ui/time";
import { PhotoViewer } from "./photo-viewer";

export interface StripFile {
  id: number;
  kind: "photo" | "drawing";
  caption: string;
  originalName: string;
  /** Revision that it was added to. */
  revision: number;
  addedBy: string;
  addedAt: Date | string;
  bytes: number;
}

export interface PhotoStripProps {
  files: readonly StripFile[];
  /** `/api/w/<workshop>` */
  api: string;
  /** The unit's number. */
  unit: number;
  /** The revision whose files may be changed here; none when left out. */
  editableRevision?: number;
  /** What the pictures show, for those who don't see them. */
  alt?: string;
}

export function PhotoStrip({ files, api, unit, editableRevision, alt = "Photo" }: PhotoStripProps) {
  const [shown, setShown] = useState<number | null>(null);
  const [removed, setRemoved] = useState<StripFile | null>(null);
  const photos = files.filter((file) => file.kind === "photo");
  const drawings = files.filter((file) => file.kind === "drawing");
  const action = `${api}/units/${unit}/files`;
  const describe = (file: StripFile) => file.caption || `${alt}, ${file.originalName || `file ${file.id}`}`;

  return (
    <div className="space-y-3">
      {removed && !files.some((file) => file.id === removed.id) ? (
        <RestoreNotice file={removed} action={action} />
      ) : null}
      {photos.length > 0 ? (
        <PhotoGrid>
          {photos.map((file, index) => (
            <div key={file.id} className="min-w-0">
              <PhotoThumb
                src={`${api}/files/${file.id}/thumb`}
                alt={describe(file)}
                href={`${api}/files/${file.id}/full`}
                onOpen={() => setShown(index)}
                caption={editableRevision === file.revision ? null : file.caption || null}
              />
              {editableRevision === file.revision ? (
                <EditFile file={file} action={action} onRemove={() => setRemoved(file)} />
              ) : null}
            </div>
          ))}
        </PhotoGrid>
      ) : null}
      {drawings.length > 0 ? (
        <ul className="divide-y divide-rule border-y border-rule">
          {drawings.map((file) => (
            <li
              key={file.id}
              className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 py-2 text-sm"
            >
              <span className="min-w-0">
                <a
                  href={`${api}/files/${file.id}/full`}
                  className="text-link inline-flex items-center gap-2 font-medium break-all"
                >
                  <FileText aria-hidden size={18} className="shrink-0" />
                  {file.originalName || `Drawing ${file.id}`}
                </a>
                <span className="block text-ink-soft">
                  PDF, {megabytes(file.bytes)} · {file.addedBy}, <Time at={file.addedAt} />
                </span>
              </span>
              {editableRevision === file.revision ? (
                <EditFile file={file} action={action} onRemove={() => setRemoved(file)} />
              ) : file.caption ? (
                <span>{file.caption}</span>
              ) : null}
            </li>
          ))}
        </ul>
      ) : null}
      <PhotoViewer
        photos={photos.map((file) => ({
          id: file.id,
          src: `${api}/files/${file.id}/full`,
          alt: describe(file),
          by: file.addedBy,
          at: file.addedAt,
        }))}
        shown={shown}
        onShow={setShown}
      />
    </div>
  );
}

/** Changes a file through the API and lets the page read again. */
function useFileChange(action: string) {
  const [pending, setPending] = useState(false);
  const [refusal, setRefusal] = useState<string | null>(null);
  const revalidator = useRevalidator();
  const change = async (form: Record<string, string>) => {
    setPending(true);
    const result = await apiRequest(action, { method: "POST", form });
    setRefusal(result.ok ? null : result.message);
    if (result.ok) await revalidator.revalidate();
    setPending(false);
  };
  return { pending, refusal, change };
}

function EditFile({ file, action, onRemove }: { file: StripFile; action: string; onRemove: () => void }) {
  const caption = useFileChange(action);
  const removal = useFileChange(action);
  const name = file.originalName || `file ${file.id}`;
  const refusal = removal.refusal ?? caption.refusal;
  return (
    <div className="mt-1 min-w-0">
      <div className="flex items-center gap-1">
        <input
          aria-label={`Caption of ${name}`}
          placeholder="Caption"
          maxLength={300}
          defaultValue={file.caption}
          className="control-box min-h-10 min-w-0 px-2 py-1 text-sm pointer-coarse:min-h-11"
          onBlur={(event) => {
            const text = event.currentTarget.value.trim();
            if (text !== file.caption) {
              void caption.change({ intent: "caption", fileId: String(file.id), caption: text });
            }
          }}
          onKeyDown={(event) => {
            if (event.key === "Enter") event.currentTarget.blur();
          }}
        />
        <Button
          type="button"
          variant="quiet"
          icon={Trash2}
          aria-label={`Take back ${name}`}
          pending={removal.pending}
          onClick={() => {
            onRemove();
            void removal.change({ intent: "remove", fileId: String(file.id) });
          }}
        />
      </div>
      {refusal ? (
        <p role="alert" className="text-sm font-medium text-fail">
          {refusal}
        </p>
      ) : null}
    </div>
  );
}

function RestoreNotice({ file, action }: { file: StripFile; action: string }) {
  const { pending, refusal, change } = useFileChange(action);
  return (
    <p role="status" className="flex flex-wrap items-center gap-3 bg-inset px-3 py-2 text-sm">
      <span className="min-w-0 break-all">{file.originalName || `File ${file.id}`} was taken back.</span>
      <Button
        type="button"
        icon={Undo2}
        pending={pending}
        onClick={() => void change({ intent: "restore", fileId: String(file.id) })}
      >
        Bring it back
      </Button>
      {refusal ? <span className="font-medium text-fail">{refusal}</span> : null}
    </p>
  );
}

function megabytes(bytes: number): string {
  return bytes < 1_000_000
    ? `${Math.max(1, Math.round(bytes / 1000))} kB`
    : `${(bytes / 1_000_000).toFixed(1)} MB`;
}
