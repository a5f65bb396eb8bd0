import { compareMaps } from "~/engine/compare-maps";
import { submissionProblems } from "~/engine/submission";
import { listFindings } from "~/services/bench/findings.server";
import type { ServiceContext } from "~/services/context.server";
import { listFiles } from "~/services/files/list-files.server";
import type { StandingUnit } from "~/services/unit-act.server";
import { unansweredFindings } from "./answer-finding.server";
import { loadRevision } from "./load-revision.server";

/** What the builder of a unit that was sent back has to work through. */
export async function loadRework({ db, person }: ServiceContext, unit: StandingUnit) {
  const [revision, examined, findings, photos] = await Promise.all([
    loadRevision(db, unit),
    unit.revision > 1 ? loadRevision(db, unit, unit.revision - 1) : null,
    listFindings(db, unit.id),
    listFiles(db, unit.id, { kind: "photo", subject: "unit" }),
  ]);
  const unanswered = await unansweredFindings(db, unit.id, revision.id);
  return {
    unit: {
      number: unit.number,
      name: unit.name,
      state: unit.state,
      revision: unit.revision,
      version: unit.version,
    },
    personId: person.id,
    sentBack: revision.sentBack,
    open: findings.filter((finding) => finding.closing === null),
    closed: findings.filter((finding) => finding.closing !== null),
    changes: examined ? compareMaps(examined.map, revision.map) : [],
    submission: {
      problems: submissionProblems(revision.map, revision.facts),
      unanswered: unanswered.map((finding) => finding.number),
    },
    photos: photos.length,
  };
}
