/**
 * A button.
 *   <Button>Save</Button>
 *   <Button variant="danger" size="bench" icon={Trash2} pending={busy}>Remove</Button>
 * `pending` keeps the button focusable but inert, and tells assistive technology that work is under way.
 * A `type` of "submit" is the default inside forms; give type="button" for anything else.
 */
import type { ComponentPropsWithRef } from "react";
import { Spinner } from "./spinner";
import type { IconType } from "./icon-type";

export type ButtonVariant = "primary" | "secondary" | "danger" | "quiet";
export type ButtonSize = "md" | "bench";

const base =
  "inline-flex items-center justify-center gap-2 rounded-sm border font-semibold no-underline select-none " +
  "disabled:opacity-55 aria-busy:opacity-80 print:hidden text-center leading-tight";

const variants: Record<ButtonVariant, string> = {
  primary:
    "border-copper bg-copper text-on-copper hover:not-disabled:border-copper-deep hover:not-disabled:bg-copper-deep",
  secondary: "border-rule-strong bg-sheet text-ink hover:not-disabled:border-ink hover:not-disabled:bg-inset",
  danger: "border-danger bg-sheet text-danger hover:not-disabled:bg-danger hover:not-disabled:text-on-danger",
  quiet:
    "border-transparent bg-transparent text-copper hover:not-disabled:bg-copper-wash hover:not-disabled:text-copper-deep",
};

const sizes: Record<ButtonSize, string> = {
  md: "min-h-10 px-4 py-2 text-sm pointer-coarse:min-h-11",
  bench: "min-h-14 px-6 py-3 text-lg",
};

/** The classes of a button, for links that look like one. */
export function buttonClass(variant: ButtonVariant = "secondary", size: ButtonSize = "md"): string {
  return `${base} ${variants[variant]} ${sizes[size]}`;
}

export interface ButtonProps extends ComponentPropsWithRef<"button"> {
  variant?: ButtonVariant;
  size?: ButtonSize;
  icon?: IconType;
  /** Puts the icon behind the label, for going forwards. */
  iconAtEnd?: boolean;
  pending?: boolean;
  /** Said while pending, in place of the label. */
  pendingLabel?: string;
}

export function Button({
  variant = "secondary",
  size = "md",
  icon: Icon,
  iconAtEnd = false,
  pending = false,
  pendingLabel,
  className = "",
  children,
  onClick,
  ...rest
}: ButtonProps) {
  const icon = Icon ? <Icon aria-hidden size={size === "bench" ? 22 : 18} className="shrink-0" /> : null;
  return (
    <button
      {...rest}
      aria-busy={pending || undefined}
      aria-disabled={pending || undefined}
      // Not `disabled`: focus would be lost, and the pressed button's name and value with it.
      onClick={pending ? (event) => event.preventDefault() : onClick}
      className={`${buttonClass(variant, size)} ${className}`}
    >
      {pending ? <Spinner /> : iconAtEnd ? null : icon}
      {pending && pendingLabel ? pendingLabel : children}
      {!pending && iconAtEnd ? icon : null}
    </button>
  );
}
