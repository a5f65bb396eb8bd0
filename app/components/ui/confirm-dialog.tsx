/**
 * A button that asks before it does something that cannot be taken back. It stays open with the action's sentences
 * when that refuses (./refusal tells the shapes), and closes when it was done or led elsewhere.
 *   <ConfirmDialog trigger="Withdraw the record" title="Withdraw record R-0007?" confirm="Withdraw"
 *     action="/records/7/withdraw" fields={{ intent: "withdraw", version: "3" }}>
 *     The label's page will say at once that this unit must not be plugged in.
 *   </ConfirmDialog>
 */
import { useEffect, useId, useRef, useState, type ReactNode } from "react";
import { useFetcher } from "react-router";
import { Button, type ButtonSize, type ButtonVariant } from "./button";
import { Dialog } from "./dialog";
import type { IconType } from "./icon-type";
import { refusalsIn } from "./refusal";

export interface ConfirmDialogProps {
  trigger: ReactNode;
  triggerVariant?: ButtonVariant;
  triggerSize?: ButtonSize;
  triggerIcon?: IconType;
  title: ReactNode;
  confirm: string;
  confirmVariant?: ButtonVariant;
  /** Where the form posts to; the current route's action unless told. */
  action?: string;
  /** Hidden fields. */
  fields?: Record<string, string>;
  /** What will happen; may hold further fields of the form, such as a reason. */
  children: ReactNode;
}

export function ConfirmDialog({
  trigger,
  triggerVariant = "danger",
  triggerSize = "md",
  triggerIcon,
  title,
  confirm,
  confirmVariant = "danger",
  action,
  fields = {},
  children,
}: ConfirmDialogProps) {
  const [open, setOpen] = useState(false);
  const formId = useId();
  const [attempt, setAttempt] = useState(0);
  // A fetcher for each opening, so that an old refusal is not shown again.
  const fetcher = useFetcher<unknown>({ key: `${formId} ${attempt}` });
  const pending = fetcher.state !== "idle";
  const refusals = pending ? [] : refusalsIn(fetcher.data);
  const refused = refusals.length > 0;
  const wasPending = useRef(false);

  useEffect(() => {
    // Done when it comes to rest without a refusal; after a redirect there is no answer at all.
    if (wasPending.current && !pending && !refused) setOpen(false);
    wasPending.current = pending;
  }, [pending, refused]);

  return (
    <>
      <Button
        type="button"
        variant={triggerVariant}
        size={triggerSize}
        icon={triggerIcon}
        onClick={() => {
          setAttempt(attempt + 1);
          setOpen(true);
        }}
      >
        {trigger}
      </Button>
      <Dialog
        open={open}
        onClose={() => setOpen(false)}
        title={title}
        footer={
          <>
            <Button type="button" onClick={() => setOpen(false)}>
              Cancel
            </Button>
            <Button type="submit" form={formId} variant={confirmVariant} pending={pending}>
              {confirm}
            </Button>
          </>
        }
      >
        <fetcher.Form id={formId} method="post" action={action} className="space-y-4">
          {Object.entries(fields).map(([name, value]) => (
            <input key={name} type="hidden" name={name} value={value} />
          ))}
          {children}
          {refused ? (
            <ul role="alert" className="space-y-1 font-medium text-fail">
              {refusals.map((sentence) => (
                <li key={sentence}>{sentence}</li>
              ))}
            </ul>
          ) : null}
        </fetcher.Form>
      </Dialog>
    </>
  );
}
