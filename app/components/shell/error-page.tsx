/**
 * The page for when there is no page: in an ErrorBoundary,
 *   export function ErrorBoundary() { return <ErrorPage error={useRouteError()} /> }
 * It is the content alone; put a shell around it where none stands yet.
 */
import { ConflictNotice } from "./conflict-notice";
import { errorAnswer } from "./error-answer";
import { LinkButton } from "../ui/link-button";
import { Sheet } from "../ui/sheet";

interface Words {
  title: string;
  message: string;
  /** Offers to load the same address again. */
  again: boolean;
}

const unexpected: Words = {
  title: "Something went wrong here",
  message:
    "The fault is ours, not yours. It was written to the log. Nothing half-done was kept: a change is either made whole or not at all.",
  again: true,
};

const words: Record<number, Words> = {
  400: { title: "That could not be read", message: "What was sent did not fit this page.", again: false },
  401: {
    title: "Please sign in",
    message: "Nobody is signed in any more. Sign in and try again.",
    again: false,
  },
  403: { title: "Not yours to do", message: "Your roles in this workshop do not allow this.", again: false },
  404: {
    title: "Nothing here",
    message: "There is no such page, or it belongs to another workshop.",
    again: false,
  },
  405: {
    title: "That does not work here",
    message: "This address does not take what was sent to it.",
    again: false,
  },
  409: {
    title: "Somebody else acted first",
    message: "It is no longer as it was when you opened the form.",
    again: false,
  },
  413: { title: "Too large", message: "What was sent is larger than this page takes.", again: false },
  415: { title: "Wrong kind of content", message: "Content of this type is not taken here.", again: false },
  422: { title: "Not possible as it stands", message: "Something stands in the way.", again: false },
  429: { title: "Too many tries", message: "Please wait a while before the next try.", again: true },
  503: {
    title: "A part of Mainsgate is away",
    message:
      "The database or another part does not answer just now. Nothing was changed. It usually comes back by itself; try again in a moment.",
    again: true,
  },
};

export function ErrorPage({ error, homeHref = "/" }: { error: unknown; homeHref?: string }) {
  const { status, message, typed, reloadHref } = errorAnswer(error);
  const { title, message: usual, again } = words[status] ?? unexpected;
  return (
    <Sheet>
      <p className="legend-text tabular-nums">Error {status}</p>
      <h1 className="mt-1 text-2xl">{title}</h1>
      {status === 409 ? (
        <div className="mt-4">
          <ConflictNotice
            bare
            message={message ?? usual}
            typed={typed}
            reloadHref={reloadHref ?? undefined}
          />
        </div>
      ) : (
        <p className="mt-3">{message ?? usual}</p>
      )}
      <div className="mt-5 flex flex-wrap gap-2">
        {again ? (
          // An empty address is this one; a full load, since the application's own state may be what failed.
          <a href="" className="text-link inline-flex min-h-11 items-center px-2 font-semibold">
            Try again
          </a>
        ) : null}
        {status === 401 ? (
          <LinkButton to="/sign-in" variant="primary" reloadDocument>
            Sign in
          </LinkButton>
        ) : null}
        <LinkButton to={homeHref} reloadDocument>
          To the start
        </LinkButton>
      </div>
    </Sheet>
  );
}
