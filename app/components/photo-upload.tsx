/**
 * Adds photos (or drawings) by file, by camera or by dropping them here: one request a file, with a progress bar; a
 * file that fails stays in the list with its reason, and the others go on.
 *   <PhotoUpload action={`/api/w/${slug}/units/7/files`} fields={{ subject: "check", checkKey }} size="bench" />
 * The page's loaders run again after the files have arrived.
 */
import { Camera, Paperclip, RotateCw, X } from "lucide-react";
import { useEffect, useId, useRef, useState, type ChangeEvent, type DragEvent } from "react";
import { useRevalidator } from "react-router";
import { Button, buttonClass } from "./ui/button";
import { Progress } from "./ui/progress";
import { uploadFile, type Upload, type UploadedFile } from "./upload-file";

const MEGABYTE = 1024 * 1024;

export interface PhotoUploadProps {
  /** Address of the API's files of the unit. */
  action: string;
  /** `subject`, and by it `checkKey` or `findingId`. */
  fields: Record<string, string>;
  /** Kinds of files to choose from; with "application/pdf" in it, drawings too. */
  accept?: string;
  /** What is being added, in the words on the button. */
  label?: string;
  size?: "md" | "bench";
  onDone?: (file: UploadedFile) => void;
}

interface Item {
  key: number;
  file: File;
  state: "waiting" | "sending" | "failed";
  share: number;
  message: string;
  again: boolean;
}

export function PhotoUpload({
  action,
  fields,
  accept = "image/*",
  label = "Add photos",
  size = "md",
  onDone,
}: PhotoUploadProps) {
  const [items, setItems] = useState<Item[]>([]);
  const [arrived, setArrived] = useState(0);
  const [turn, setTurn] = useState(0);
  const [dragging, setDragging] = useState(false);
  const revalidator = useRevalidator();
  const nextKey = useRef(0);
  const running = useRef<{ key: number; upload: Upload } | null>(null);
  const id = useId();

  const change = (key: number, changes: Partial<Item>) =>
    setItems((before) => before.map((item) => (item.key === key ? { ...item, ...changes } : item)));
  const drop = (key: number) => setItems((before) => before.filter((item) => item.key !== key));

  function add(files: Iterable<File>) {
    const added = Array.from(files).map((file): Item => {
      const base = { key: nextKey.current++, file, share: 0 };
      // Saves a long wait for the same refusal; the server has the last word.
      return file.size > 25 * MEGABYTE
        ? { ...base, state: "failed", message: "The file is too large: at most 25 MB.", again: false }
        : { ...base, state: "waiting", message: "", again: false };
    });
    setItems((before) => [...before, ...added]);
  }

  // One after another: a camera's files are large, and a workshop's uplink is not.
  const next = items.find((item) => item.state === "waiting");
  useEffect(() => {
    if (!next || running.current) return;
    const { key, file } = next;
    const upload = uploadFile(action, fields, file, (share) => change(key, { share }));
    running.current = { key, upload };
    change(key, { state: "sending", share: 0 });
    void upload.result.then((result) => {
      running.current = null;
      setTurn((before) => before + 1);
      if (result.ok) {
        drop(key);
        setArrived((count) => count + 1);
        onDone?.(result.file);
        void revalidator.revalidate();
      } else {
        change(key, { state: "failed", message: result.message, again: result.again });
      }
    });
    // `turn` wakes the next one also when the running file was taken out of the list.
  }, [next, turn, action, fields, onDone, revalidator]);

  const sending = items.some((item) => item.state !== "failed");
  useEffect(() => {
    if (!sending) return;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", warn);
    return () => window.removeEventListener("beforeunload", warn);
  }, [sending]);

  function choose(event: ChangeEvent<HTMLInputElement>) {
    add(event.currentTarget.files ?? []);
    // So that the same file can be chosen again.
    event.currentTarget.value = "";
  }

  function dropFiles(event: DragEvent) {
    event.preventDefault();
    setDragging(false);
    add(event.dataTransfer.files);
  }

  return (
    <div
      onDragOver={(event) => {
        event.preventDefault();
        setDragging(true);
      }}
      onDragLeave={() => setDragging(false)}
      onDrop={dropFiles}
      className={`border border-dashed p-3 print:hidden ${dragging ? "border-copper bg-copper-wash" : "border-rule-strong"}`}
    >
      <div className="flex flex-wrap items-center gap-2">
        <ChooseFiles id={`${id}-camera`} camera size={size} accept="image/*" onChange={choose}>
          Take a photo
        </ChooseFiles>
        <ChooseFiles id={`${id}-files`} size={size} accept={accept} onChange={choose}>
          {label}
        </ChooseFiles>
        <p className="text-sm text-ink-soft pointer-coarse:hidden">or drop them here</p>
      </div>
      {items.length > 0 ? (
        <ul className="mt-3 space-y-3">
          {items.map((item) => (
            <li key={item.key} className="flex items-start gap-2">
              <div className="min-w-0 flex-1">
                {item.state === "failed" ? (
                  <p role="alert" className="text-sm">
                    <span className="font-medium break-all">{item.file.name}</span>
                    <span className="block font-medium text-fail">{item.message}</span>
                  </p>
                ) : (
                  <Progress
                    label={item.file.name}
                    value={item.state === "sending" && item.share < 1 ? item.share : undefined}
                    detail={sendingWords(item)}
                  />
                )}
              </div>
              {item.state === "failed" && item.again ? (
                <Button
                  type="button"
                  icon={RotateCw}
                  size={size}
                  onClick={() => change(item.key, { state: "waiting", message: "" })}
                >
                  Try again
                </Button>
              ) : null}
              <Button
                type="button"
                variant="quiet"
                icon={X}
                size={size}
                aria-label={`${item.state === "failed" ? "Leave out" : "Stop"} ${item.file.name}`}
                onClick={() => {
                  if (running.current?.key === item.key) running.current.upload.abort();
                  drop(item.key);
                }}
              />
            </li>
          ))}
        </ul>
      ) : null}
      <p role="status" className="sr-only">
        {arrived > 0 ? `${arrived} ${arrived === 1 ? "file" : "files"} added.` : ""}
      </p>
    </div>
  );
}

function sendingWords(item: Item): string {
  if (item.state === "waiting") return "waiting";
  return item.share < 1 ? `${Math.round(item.share * 100)} %` : "being prepared";
}

function ChooseFiles({
  id,
  camera = false,
  size,
  accept,
  onChange,
  children,
}: {
  id: string;
  camera?: boolean;
  size: "md" | "bench";
  accept: string;
  onChange: (event: ChangeEvent<HTMLInputElement>) => void;
  children: string;
}) {
  const Icon = camera ? Camera : Paperclip;
  return (
    // A phone's camera is worth a button of its own; on a desk it would open the same file chooser twice.
    <span className={camera ? "hidden pointer-coarse:inline-flex" : "inline-flex"}>
      <input
        id={id}
        type="file"
        className="peer sr-only"
        accept={accept}
        multiple={!camera}
        capture={camera ? "environment" : undefined}
        onChange={onChange}
      />
      <label
        htmlFor={id}
        className={`${buttonClass("secondary", size)} peer-focus-visible:outline-3 peer-focus-visible:outline-offset-2 peer-focus-visible:outline-focus`}
      >
        <Icon aria-hidden size={size === "bench" ? 22 : 18} className="shrink-0" />
        {children}
      </label>
    </span>
  );
}
