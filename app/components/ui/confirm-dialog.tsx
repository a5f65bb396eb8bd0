/**
 * A button that asks before it does something that cannot be taken back. The form is yours: a fetcher's, or one that
 * goes to another page.
 *   <ConfirmDialog trigger="Withdraw the record" title="Withdraw record R-0007?" confirm="Withdraw"
 *     action="/records/7/withdraw" fields={{ intent: "withdraw", version: "3" }}>
 *     The label's page will say at once that this unit must not be plugged in.
 *   </ConfirmDialog>
 */
import { useEffect, useId, useState, type ReactNode } from "react";
import { useFetcher } from "react-router";
import { Button, type ButtonSize, type ButtonVariant } from "./button";
import { Dialog } from "./dialog";
import type { IconType } from "./icon-type";

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
  const fetcher = useFetcher<{ message?: string }>();
  const formId = useId();
  const pending = fetcher.state !== "idle";
  // An action answers a refusal with data that has a message; anything else means that it was done.
  const message = fetcher.data?.message;

  useEffect(() => {
    if (fetcher.state === "idle" && fetcher.data !== undefined && message === undefined) setOpen(false);
  }, [fetcher.state, fetcher.data, message]);

  return (
    <>
      <Button
        type="button"
        variant={triggerVariant}
        size={triggerSize}
        icon={triggerIcon}
        onClick={() => setOpen(true)}
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
          {message && !pending ? (
            <p role="alert" className="font-medium text-fail">
              {message}
            </p>
          ) : null}
        </fetcher.Form>
      </Dialog>
    </>
  );
}
