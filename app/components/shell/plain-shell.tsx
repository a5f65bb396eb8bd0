/**
 * What stands around pages outside a workshop: sign-in, invitations, the public page behind a label, errors.
 *   <PlainShell><Sheet title="Sign in">…</Sheet></PlainShell>
 */
import type { ReactNode } from "react";
import { Link } from "react-router";
import { PendingBar } from "../ui/pending-bar";
import { Wordmark } from "./mark";
import { SkipLink } from "./skip-link";

export function PlainShell({
  children,
  wide = false,
  footer,
}: {
  children: ReactNode;
  wide?: boolean;
  footer?: ReactNode;
}) {
  return (
    <div className="squared-paper flex min-h-dvh flex-col">
      <SkipLink />
      <PendingBar />
      <header className="px-4 py-4 print:hidden">
        <Link to="/" className="inline-flex min-h-11 items-center" aria-label="Mainsgate, start page">
          <Wordmark />
        </Link>
      </header>
      <main
        id="content"
        tabIndex={-1}
        className={`mx-auto w-full grow px-4 pt-4 pb-12 outline-none sm:pt-10 ${wide ? "max-w-5xl" : "max-w-lg"}`}
      >
        {children}
      </main>
      <footer className="px-4 py-4 text-center text-sm text-ink-soft">
        {footer ?? "Mainsgate advises. Local codes and licensed practice decide."}
      </footer>
    </div>
  );
}
