/**
 * A menu that opens from a button: the browser's own popover, so it opens without JavaScript, closes on Escape and on
 * a tap outside, and lies above everything. Links inside close it.
 *   <PopoverMenu label="Your account" trigger={<User />} place="top-right">…</PopoverMenu>
 */
import { useEffect, useId, useRef, type ReactNode } from "react";
import { useLocation } from "react-router";

export type MenuPlace = "top-left" | "top-right" | "bottom";

const places: Record<MenuPlace, string> = {
  "top-left": "top-14 left-2 right-auto bottom-auto w-72 max-w-[calc(100vw-1rem)]",
  "top-right": "top-14 right-2 left-auto bottom-auto w-72 max-w-[calc(100vw-1rem)]",
  bottom: "inset-x-0 top-auto bottom-0 w-full max-w-none pb-[max(0.5rem,env(safe-area-inset-bottom))]",
};

export function PopoverMenu({
  label,
  trigger,
  triggerClass,
  place,
  children,
}: {
  /** The button's name, when `trigger` is no text. */
  label?: string;
  trigger: ReactNode;
  triggerClass: string;
  place: MenuPlace;
  children: ReactNode;
}) {
  const id = useId();
  const menu = useRef<HTMLDivElement>(null);
  const { key } = useLocation();

  useEffect(() => {
    // The page changed: the choice was made. Browsers without popover show the menu in the page and need no closing.
    const element = menu.current;
    if (element && typeof element.hidePopover === "function" && element.matches(":popover-open"))
      element.hidePopover();
  }, [key]);

  return (
    <>
      <button type="button" popoverTarget={id} aria-label={label} className={triggerClass}>
        {trigger}
      </button>
      <div
        ref={menu}
        id={id}
        popover="auto"
        className={`sheet-frame fixed m-0 max-h-[80dvh] overflow-y-auto bg-sheet p-[5px] text-ink ${places[place]}`}
      >
        {children}
      </div>
    </>
  );
}

/** The look of one line of a menu, for links and buttons alike. */
export const menuLine =
  "flex min-h-11 w-full items-center gap-3 rounded-sm px-3 text-left text-sm font-medium text-ink hover:bg-inset " +
  "aria-[current=page]:bg-copper-wash aria-[current=page]:text-copper-deep focus-visible:-outline-offset-2";
