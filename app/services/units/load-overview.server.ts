import { submissionProblems } from "~/engine/submission";
import { standingOf } from "~/services/archive/standing.server";
import { listFindings } from "~/services/bench/findings.server";
import { dayIn, type ServiceContext } from "~/services/context.server";
import { listFiles } from "~/services/files/list-files.server";
import type { StandingUnit } from "~/services/unit-act.server";
import { type Action, decide } from "~/workflow/permissions";
import { unansweredFindings } from "./answer-finding.server";
import { listRevisions, loadRevision } from "./load-revision.server";
import { loadHandOver } from "./hand-over-unit.server";
import { findPersonName } from "./unit-people.server";
import { loadVersions } from "./versions.server";

/** Everything that the page of one unit shows, and what this person may do with it now. */
export async function loadOverview(context: ServiceContext, unit: StandingUnit) {
  const { db, person, workshop } = context;
  const may = (action: Action) => decide(action, { id: person.id, roles: workshop.roles }, unit).allowed;
  const revision = await loadRevision(db, unit);
  const [files, findings, revisions, unanswered, builder, inspector, standing, versions, handOver] =
    await Promise.all([
      listFiles(db, unit.id),
      listFindings(db, unit.id),
      listRevisions(db, unit.id),
      unansweredFindings(db, unit.id, revision.id),
      findPersonName(db, unit.builderId),
      unit.inspectorId === null ? null : findPersonName(db, unit.inspectorId),
      standingOf(db, unit, dayIn(workshop.timeZone, context.now())),
      loadVersions(db, unit),
      may("unit.hand-over") ? loadHandOver(db, workshop.id, unit) : null,
    ]);
  return {
    unit: {
      number: unit.number,
      name: unit.name,
      purpose: unit.purpose,
      placeOfUse: unit.placeOfUse,
      state: unit.state,
      revision: unit.revision,
      version: unit.version,
      isOwn: unit.builderId === person.id,
    },
    standing,
    builder,
    inspector,
    map: revision.map,
    ruleSet: revision.ruleSet,
    facts: revision.facts,
    files,
    findings,
    revisions,
    submission: {
      problems: may("unit.submit") ? submissionProblems(revision.map, revision.facts) : [],
      unanswered: unanswered.map((finding) => finding.number),
    },
    versions,
    /** Whom the unit can be given to, for a steward, when its builder has left. */
    handOver: handOver?.needed ? handOver.candidates : null,
    may: {
      edit: may("unit.edit"),
      discard: may("unit.discard"),
      succeed: may("unit.succeed") && versions.obstacle === null,
      readSheet: unit.state !== "draft" && may("bench.read"),
      review: may("signing.review"),
      readRecord: may("archive.read"),
      readTrail: may("trail.read"),
    },
  };
}
