/** One button for all example figures of a map, which asks before it takes them for those of the parts. */
import { Check } from "lucide-react";
import { useState } from "react";
import { Button } from "./ui/button";
import { Dialog } from "./ui/dialog";

export function ConfirmFigures({ count, onConfirm }: { count: number; onConfirm: () => void }) {
  const [open, setOpen] = useState(false);
  if (count === 0) return null;
  return (
    <div className="flex flex-wrap items-center justify-between gap-3 border-b border-rule bg-advice-wash px-4 py-3">
      <p className="min-w-0 text-sm">
        {count === 1 ? "1 element still has" : `${count} elements still have`} the starter’s example figures.
        Enter those of the part itself, or confirm them row by row.
      </p>
      <Button type="button" icon={Check} onClick={() => setOpen(true)}>
        All figures are my parts’…
      </Button>
      <Dialog
        open={open}
        onClose={() => setOpen(false)}
        title={count === 1 ? "Is the figure your part’s own?" : `Are all ${count} your parts’ own?`}
        footer={
          <>
            <Button type="button" onClick={() => setOpen(false)}>
              Cancel
            </Button>
            <Button
              type="button"
              variant="primary"
              onClick={() => {
                setOpen(false);
                onConfirm();
              }}
            >
              I have looked: they are
            </Button>
          </>
        }
      >
        <p>
          You promise that you have looked at every part, and that each rating, material, gap and insulation
          in these rows is what is marked on it, stated by its maker or measured by you. Fuses, wires and
          limits are computed from them, and the bench tests against them: a wrong figure can kill. Mark as
          not known what you don’t know.
        </p>
      </Dialog>
    </div>
  );
}
