import { Link } from "react-router";
import { stateTitles, type UnitState } from "~/workflow/states";

interface Version {
  number: number;
  name: string;
  state: UnitState;
}

/** Which unit this one is a new version of, and which are new versions of it, each with the way there. */
export function VersionNotes({
  slug,
  predecessor,
  successors,
}: {
  slug: string;
  predecessor: Version | null;
  successors: readonly Version[];
}) {
  if (!predecessor && successors.length === 0) return null;
  return (
    <ul className="space-y-1 border-l-4 border-rule-strong bg-sheet px-4 py-3">
      {predecessor ? (
        <li>
          A new version of <VersionLink slug={slug} version={predecessor} />.{" "}
          {predecessor.state === "signed" ? "The old one stays in force until this one is signed." : null}
        </li>
      ) : null}
      {successors.map((version) => (
        <li key={version.number}>
          {successorWords(version.state)} <VersionLink slug={slug} version={version} />.
        </li>
      ))}
    </ul>
  );
}

function VersionLink({ slug, version }: { slug: string; version: Version }) {
  return (
    <>
      <Link to={`/w/${slug}/units/${version.number}`} className="text-link">
        unit {version.number}, “{version.name}”
      </Link>{" "}
      ({stateTitles[version.state].toLowerCase()})
    </>
  );
}

function successorWords(state: UnitState): string {
  switch (state) {
    case "signed":
    case "superseded":
      return "Replaced by its new version,";
    case "refused":
    case "withdrawn":
      return "A new version was tried:";
    default:
      return "A new version is being worked on:";
  }
}
