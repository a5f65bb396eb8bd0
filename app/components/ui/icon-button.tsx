/**
 * A button that is only an icon; its label is for assistive technology and the pointer's tip.
 *   <IconButton icon={Trash2} label="Remove F1" onClick={…} />
 */
import type { ComponentPropsWithRef } from "react";
import type { IconType } from "./icon-type";

export interface IconButtonProps extends Omit<ComponentPropsWithRef<"button">, "children" | "aria-label"> {
  icon: IconType;
  label: string;
}

export function IconButton({ icon: Icon, label, className = "", ...rest }: IconButtonProps) {
  return (
    <button
      type="button"
      {...rest}
      aria-label={label}
      title={label}
      className={`inline-flex size-9 shrink-0 items-center justify-center rounded-sm text-ink-soft hover:bg-inset hover:text-ink disabled:opacity-40 pointer-coarse:size-11 print:hidden ${className}`}
    >
      <Icon aria-hidden size={17} />
    </button>
  );
}
