import { ChevronLeft, ChevronRight, CircleCheckBig, SkipForward } from "lucide-react";
import { useLayoutEffect } from "react";
import { useNavigate } from "react-router";
import { LinkButton } from "~/components/ui/link-button";
import { checkHref } from "./check-href";

/**
 * Previous and next, always under the thumbs; with the arrow keys or [ and ] from the keyboard, N for the next one to be
 * done. Keys that are being typed into a field, and those of an open dialog, stay there.
 */
export function StepBar({
  base,
  previousKey,
  nextKey,
  nextOpenKey,
  mayWork,
}: {
  base: string;
  previousKey: string | null;
  nextKey: string | null;
  nextOpenKey: string | null;
  mayWork: boolean;
}) {
  const navigate = useNavigate();
  // Together with the page: a key pressed right after a step has changed must not act on the one before.
  useLayoutEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey) return;
      if (isTyping(event.target) || document.querySelector("dialog[open]")) return;
      const key =
        event.key === "ArrowLeft" || event.key === "["
          ? previousKey
          : event.key === "ArrowRight" || event.key === "]"
            ? nextKey
            : event.key === "n"
              ? nextOpenKey
              : null;
      if (key === null) return;
      event.preventDefault();
      void navigate(checkHref(base, key));
    };
    window.addEventListener("keydown", onKey);
    return () => window.removeEventListener("keydown", onKey);
  }, [navigate, base, previousKey, nextKey, nextOpenKey]);

  return (
    <nav
      aria-label="Steps"
      className="fixed inset-x-0 bottom-0 z-10 border-t border-rule-strong bg-sheet px-2 pt-2 pb-[max(0.5rem,env(safe-area-inset-bottom))] print:hidden"
    >
      <div className="mx-auto grid max-w-7xl grid-cols-[1fr_auto_1fr] gap-2">
        {previousKey ? (
          <LinkButton
            to={checkHref(base, previousKey)}
            size="bench"
            icon={ChevronLeft}
            rel="prev"
            prefetch="render"
          >
            Previous
          </LinkButton>
        ) : (
          <span />
        )}
        {nextOpenKey ? (
          <LinkButton
            to={checkHref(base, nextOpenKey)}
            size="bench"
            icon={SkipForward}
            aria-label="Next to do"
            className="max-sm:px-4"
          >
            <span className="max-sm:sr-only">Next to do</span>
          </LinkButton>
        ) : mayWork ? (
          <LinkButton
            to={`${base}/close`}
            size="bench"
            icon={CircleCheckBig}
            aria-label="Finish"
            className="max-sm:px-4"
          >
            <span className="max-sm:sr-only">Finish</span>
          </LinkButton>
        ) : (
          <span />
        )}
        {nextKey ? (
          <LinkButton
            to={checkHref(base, nextKey)}
            size="bench"
            variant="primary"
            rel="next"
            prefetch="render"
          >
            Next
            <ChevronRight aria-hidden size={22} className="shrink-0" />
          </LinkButton>
        ) : (
          <LinkButton to={base} size="bench" variant="primary">
            Whole sheet
          </LinkButton>
        )}
      </div>
    </nav>
  );
}

function isTyping(target: EventTarget | null): boolean {
  return (
    target instanceof HTMLElement &&
    (target.isContentEditable || target.matches("input, textarea, select, [role=slider]"))
  );
}
