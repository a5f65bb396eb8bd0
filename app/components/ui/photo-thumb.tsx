/**
 * A photo as a small picture with its caption; it leads to the large one.
 *   <PhotoThumb src={photo.smallUrl} href={photo.largeUrl} alt="Mains inlet, cover off" caption={<Time at={photo.takenAt} />} />
 * Several stand in a <PhotoGrid>. Without `src` the picture is still being prepared, or could not be (`failed`).
 */
import { ImageOff } from "lucide-react";
import type { ReactNode } from "react";
import { Spinner } from "./spinner";

export interface PhotoThumbProps {
  src: string | null;
  alt: string;
  href?: string;
  /** Shows the large one within the page; without JavaScript the link leads to it. */
  onOpen?: () => void;
  caption?: ReactNode;
  failed?: boolean;
  /** A button to remove it, for instance. */
  action?: ReactNode;
  size?: "md" | "large";
}

export function PhotoGrid({ children }: { children: ReactNode }) {
  return <div className="grid grid-cols-2 gap-3 sm:grid-cols-[repeat(auto-fill,11rem)]">{children}</div>;
}

export function PhotoThumb({
  src,
  alt,
  href,
  onOpen,
  caption,
  failed = false,
  action,
  size = "md",
}: PhotoThumbProps) {
  const box = size === "large" ? "h-56" : "h-32";
  const picture = src ? (
    <img src={src} alt={alt} loading="lazy" decoding="async" className={`w-full object-cover ${box}`} />
  ) : (
    <span
      role="img"
      aria-label={alt}
      className={`flex w-full flex-col items-center justify-center gap-2 bg-inset text-sm text-ink-soft ${box}`}
    >
      {failed ? <ImageOff aria-hidden size={24} /> : <Spinner size={24} />}
      {failed ? "Could not be read" : "Being prepared"}
    </span>
  );
  return (
    <figure
      className={`min-w-0 border border-rule-strong bg-sheet p-1 ${size === "large" ? "w-full max-w-md" : "w-full max-w-44"}`}
    >
      {href && src ? (
        // A plain link: the picture is a file, not a page of the application.
        <a
          href={href}
          target="_blank"
          rel="noreferrer"
          className="block"
          onClick={(event) => {
            if (!onOpen || event.ctrlKey || event.metaKey || event.shiftKey) return;
            event.preventDefault();
            onOpen();
          }}
        >
          {picture}
        </a>
      ) : (
        picture
      )}
      {caption || action ? (
        <figcaption className="flex items-center justify-between gap-2 px-1 pt-1 text-sm text-ink-soft">
          <span className="min-w-0">{caption}</span>
          {action}
        </figcaption>
      ) : null}
    </figure>
  );
}
