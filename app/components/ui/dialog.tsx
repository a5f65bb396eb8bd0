/**
 * A modal dialog on the native element: the browser traps the focus, closes on Escape and gives the focus back.
 *   const [open, setOpen] = useState(false);
 *   <Dialog open={open} onClose={() => setOpen(false)} title="Take a reading again">…</Dialog>
 */
import { X } from "lucide-react";
import { useEffect, useId, useRef, type ReactNode } from "react";

export interface DialogProps {
  open: boolean;
  /** Called however it closes: Escape, the close button, or a form with method="dialog". */
  onClose: () => void;
  title: ReactNode;
  /** The row of buttons. */
  footer?: ReactNode;
  wide?: boolean;
  children: ReactNode;
}

export function Dialog({ open, onClose, title, footer, wide = false, children }: DialogProps) {
  const dialog = useRef<HTMLDialogElement>(null);
  const titleId = useId();

  useEffect(() => {
    const element = dialog.current;
    if (!element) return;
    if (open && !element.open) element.showModal();
    if (!open && element.open) element.close();
  }, [open]);

  return (
    <dialog
      ref={dialog}
      aria-labelledby={titleId}
      onClose={(event) => {
        // A dialog or file chooser inside this one closes on its own account.
        if (event.target === dialog.current) onClose();
      }}
      className={`sheet-frame m-auto max-h-[90dvh] w-[calc(100%-2rem)] overflow-y-auto bg-sheet p-[5px] text-ink ${wide ? "max-w-3xl" : "max-w-lg"}`}
    >
      <div className="flex items-start justify-between gap-4 border-b border-rule px-4 py-3">
        <h2 id={titleId} className="text-lg">
          {title}
        </h2>
        <button
          type="button"
          aria-label="Close"
          onClick={() => dialog.current?.close()}
          className="-my-1.5 -mr-2 inline-flex size-11 shrink-0 items-center justify-center rounded-sm text-ink-soft hover:bg-inset hover:text-ink"
        >
          <X aria-hidden size={20} />
        </button>
      </div>
      <div className="px-4 py-4">{children}</div>
      {footer ? (
        <div className="flex flex-wrap justify-end gap-2 border-t border-rule px-4 py-3">{footer}</div>
      ) : null}
    </dialog>
  );
}
