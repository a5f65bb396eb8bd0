/**
 * Somebody else acted first. Says who did what, and shows what was typed so that nothing is lost.
 * On the page of the form itself (what was typed is still in its fields):
 *   <ConflictNotice message={actionData.conflict} reloadHref="/w/demo/units/7" />
 * On a page of its own, give `typed` too:
 *   <ConflictNotice message={…} typed={[{ label: "Reason", value: "…" }]} reloadHref="…" />
 */
import { GitPullRequestArrow } from "lucide-react";
import { useEffect, useRef } from "react";
import { LinkButton } from "../ui/link-button";

export interface TypedText {
  label: string;
  value: string;
}

export interface ConflictNoticeProps {
  message: string;
  typed?: readonly TypedText[];
  reloadHref?: string;
  /** Leaves out the heading where the page's own says the same. */
  bare?: boolean;
}

export function ConflictNotice({ message, typed = [], reloadHref, bare = false }: ConflictNoticeProps) {
  const box = useRef<HTMLDivElement>(null);
  useEffect(() => box.current?.focus(), [message]);
  return (
    <div
      ref={box}
      role="alert"
      tabIndex={-1}
      className="space-y-3 border-l-4 border-undecided bg-undecided-wash px-4 py-3"
    >
      {bare ? null : (
        <p className="flex items-center gap-2 font-semibold">
          <GitPullRequestArrow aria-hidden size={20} className="shrink-0 text-undecided" />
          Somebody else acted first
        </p>
      )}
      <p>{message}</p>
      <p className="text-sm">
        Your change was not made. {bare && typed.length === 0 ? "Look" : "What you typed is still here; look"}{" "}
        at what is new before you try again.
      </p>
      {typed.length > 0 ? (
        <dl className="space-y-2">
          {typed.map((text) => (
            <div key={text.label}>
              <dt className="legend-text">{text.label}</dt>
              <dd className="border border-rule-strong bg-sheet px-3 py-2 whitespace-pre-wrap">
                {text.value}
              </dd>
            </div>
          ))}
        </dl>
      ) : null}
      {reloadHref ? <LinkButton to={reloadHref}>Show the present state</LinkButton> : null}
    </div>
  );
}
