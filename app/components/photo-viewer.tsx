/** One photo large, with the next and the previous by arrow keys and buttons. */
import { ChevronLeft, ChevronRight } from "lucide-react";
import { useEffect } from "react";
import { Button } from "./ui/button";
import { Dialog } from "./ui/dialog";
import { Time } from "./ui/time";

export interface ViewerPhoto {
  id: number;
  src: string;
  alt: string;
  by: string;
  at: Date | string;
}

export interface PhotoViewerProps {
  photos: readonly ViewerPhoto[];
  /** Index of the photo shown; null when closed. */
  shown: number | null;
  onShow: (index: number | null) => void;
}

export function PhotoViewer({ photos, shown, onShow }: PhotoViewerProps) {
  const photo = shown === null ? undefined : photos[shown];
  const count = photos.length;
  const step = (by: number) => {
    if (shown !== null) onShow((shown + by + count) % count);
  };

  useEffect(() => {
    if (shown === null) return;
    // Wherever the focus is inside the dialog, and before the page below hears of it: its arrows turn other things.
    const turn = (event: KeyboardEvent) => {
      const by = event.key === "ArrowLeft" ? -1 : event.key === "ArrowRight" ? 1 : 0;
      if (by === 0) return;
      event.stopImmediatePropagation();
      onShow((shown + by + count) % count);
    };
    window.addEventListener("keydown", turn, { capture: true });
    return () => window.removeEventListener("keydown", turn, { capture: true });
  }, [shown, count, onShow]);
  return (
    <Dialog
      open={photo !== undefined}
      onClose={() => onShow(null)}
      title={photo && shown !== null ? `Photo ${shown + 1} of ${photos.length}` : "Photo"}
      wide
      footer={
        photos.length > 1 ? (
          <>
            <Button type="button" icon={ChevronLeft} onClick={() => step(-1)}>
              Previous
            </Button>
            <Button type="button" icon={ChevronRight} onClick={() => step(1)}>
              Next
            </Button>
          </>
        ) : null
      }
    >
      {photo ? (
        <figure>
          <img src={photo.src} alt={photo.alt} className="mx-auto max-h-[65dvh] object-contain" />
          <figcaption className="mt-2 text-sm">
            {photo.alt}
            <span className="block text-ink-soft">
              {photo.by}, <Time at={photo.at} /> ·{" "}
              <a href={photo.src} target="_blank" rel="noreferrer" className="text-link">
                Open by itself
              </a>
            </span>
          </figcaption>
        </figure>
      ) : null}
    </Dialog>
  );
}
