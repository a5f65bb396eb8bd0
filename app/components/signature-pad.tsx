/**
 * A field to sign in, with finger, pen or mouse. Gives the drawing as a PNG data URL, or "" while it is empty. What was
 * drawn stays when the window changes its size.
 *   <SignaturePad labelledBy="signature-label" onChange={setImage} />
 */
import { Eraser, Undo2 } from "lucide-react";
import { useEffect, useRef, useState } from "react";
import SignatureCanvasModule from "react-signature-canvas";
import { Button } from "./ui/button";

type SignatureCanvas = typeof SignatureCanvasModule;

/** The module is CommonJS: Node gives its exports as they are, the browser's bundle its default. */
function unwrapDefault(imported: unknown): SignatureCanvas {
  const candidate =
    typeof imported === "object" && imported !== null && "default" in imported ? imported.default : imported;
  if (!isCanvas(candidate)) throw new TypeError("react-signature-canvas exports no component.");
  return candidate;
}

function isCanvas(value: unknown): value is SignatureCanvas {
  return typeof value === "function";
}

const Canvas = unwrapDefault(SignatureCanvasModule);

export interface SignaturePadProps {
  /** Id of the element that names the field. */
  labelledBy: string;
  onChange: (dataUrl: string) => void;
}

export function SignaturePad({ labelledBy, onChange }: SignaturePadProps) {
  const pad = useRef<InstanceType<SignatureCanvas>>(null);
  const box = useRef<HTMLDivElement>(null);
  const [strokes, setStrokes] = useState(0);

  const tell = () => {
    const current = pad.current;
    if (!current) return;
    const groups = current.toData();
    setStrokes(groups.length);
    onChange(groups.length === 0 ? "" : current.toDataURL("image/png"));
  };

  // The canvas has as many pixels as the screen shows, and is drawn anew when the box changes its size.
  useEffect(() => {
    const element = box.current;
    if (!element) return;
    const fit = () => {
      const current = pad.current;
      if (!current) return;
      const canvas = current.getCanvas();
      const { width, height } = element.getBoundingClientRect();
      if (width === 0) return;
      const ratio = Math.min(2, Math.max(1, window.devicePixelRatio));
      if (canvas.width === Math.round(width * ratio) && canvas.height === Math.round(height * ratio)) return;
      const groups = current.toData();
      canvas.width = Math.round(width * ratio);
      canvas.height = Math.round(height * ratio);
      canvas.getContext("2d")?.scale(ratio, ratio);
      current.clear();
      if (groups.length > 0) current.fromData(groups);
    };
    const observer = new ResizeObserver(fit);
    observer.observe(element);
    fit();
    return () => observer.disconnect();
  }, []);

  const undo = () => {
    const current = pad.current;
    if (!current) return;
    const groups = current.toData().slice(0, -1);
    current.clear();
    if (groups.length > 0) current.fromData(groups);
    tell();
  };
  const clear = () => {
    pad.current?.clear();
    tell();
  };

  return (
    <div>
      <div
        ref={box}
        // White paper in every theme: the ink is dark, and it is printed so.
        className="relative h-44 w-full max-w-2xl border border-rule-strong bg-white"
      >
        <span
          aria-hidden
          className="pointer-events-none absolute inset-x-6 bottom-10 border-b border-dashed border-sign-black/40"
        />
        <Canvas
          ref={pad}
          penColor="#1b2126"
          minWidth={0.9}
          maxWidth={2.6}
          clearOnResize={false}
          onEnd={tell}
          canvasProps={{
            className: "absolute inset-0 size-full touch-none cursor-crosshair",
            role: "img",
            "aria-labelledby": labelledBy,
          }}
        />
      </div>
      <div className="mt-2 flex flex-wrap items-center gap-2">
        <Button type="button" icon={Undo2} onClick={undo} disabled={strokes === 0}>
          Undo stroke
        </Button>
        <Button type="button" icon={Eraser} onClick={clear} disabled={strokes === 0}>
          Clear
        </Button>
        <span role="status" className="text-sm text-ink-soft">
          {strokes === 0 ? "Nothing drawn yet" : `${strokes} ${strokes === 1 ? "stroke" : "strokes"}`}
        </span>
      </div>
    </div>
  );
}
