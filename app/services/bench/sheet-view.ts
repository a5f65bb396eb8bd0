import type { Analysis } from "~/engine/analysis";
import type { LineVerdict } from "~/engine/bench-answer";
import type { BenchCheck, InstrumentKind } from "~/engine/bench-check";
import type { Accuracy, Judgement, UncertaintyPolicy } from "~/engine/verdict";
import type { FileView } from "~/services/files/list-files.server";
import type { LoadedRevision } from "~/services/units/load-revision.server";

export type FindingSeverity = "danger" | "defect" | "advice";

export interface FindingAnswerView {
  id: number;
  /** Revision in which the builder answered. */
  revision: number;
  text: string;
  answeredBy: string;
  answeredAt: Date;
}

/** A finding with what the builder answered and how an inspector closed it. */
export interface FindingView {
  id: number;
  /** Counts up within the unit. */
  number: number;
  severity: FindingSeverity;
  checkKey: string | null;
  elementId: string | null;
  text: string;
  /** Revision on which it was raised. */
  revision: number;
  raisedBy: string;
  raisedById: number;
  raisedAt: Date;
  /** Photos of the finding and of its answers, the oldest first. */
  photos: FileView[];
  answers: FindingAnswerView[];
  closing: { text: string; by: string; at: Date } | null;
}

export type ObservationKind = "measured" | "examined" | "not-applicable" | "not-possible" | "carried-over";

/**
 * One row of what the bench said to a check. For a carried-over row the content (value, instrument, answer, who and
 * when) is that of the reading it points to, and `carried` tells who carried it over.
 */
export interface ObservationView {
  id: number;
  checkKey: string;
  /** Never "carried-over": that is told by `carried`. */
  kind: Exclude<ObservationKind, "carried-over">;
  /** As displayed; `bound` tells that the display read over or under its range. */
  value: number | null;
  bound: "over" | "under" | null;
  unit: string | null;
  instrument: {
    id: number;
    name: string;
    serial: string;
    kind: string;
    /** Until when it was in calibration on the day of the reading. */
    calibrationDue: string;
  } | null;
  /** The instrument's accuracy at that value, in the reading's unit; null outside every stated range. */
  accuracy: Accuracy | null;
  conditions: string;
  conforms: boolean | null;
  /** Why, for "not-applicable", "not-possible" and corrections. */
  reason: string | null;
  note: string | null;
  /** Revision on which it was taken. */
  revision: number;
  by: string;
  byId: number;
  at: Date;
  /** The row that this one corrects. */
  correctsId: number | null;
  carried: { fromId: number; by: string; byId: number; at: Date } | null;
}

export type { LineVerdict };

/** One check of the sheet with all that the bench said to it. */
export interface SheetLine {
  check: BenchCheck;
  verdict: LineVerdict;
  /** Why the verdict is what it is, in a sentence. */
  because: string;
  /** The reading against the limit, with its uncertainty; null where there is no reading. */
  judged: Judgement | null;
  /** The one that counts: the latest. */
  observation: ObservationView | null;
  /** All of this revision, the latest first. */
  history: ObservationView[];
  photos: FileView[];
  /** A photo is required and there is none of this revision (or of the one that was carried over). */
  photoMissing: boolean;
  findings: FindingView[];
}

export interface SheetProgress {
  total: number;
  decided: number;
  byVerdict: Record<LineVerdict, number>;
  photosMissing: number;
}

export interface Sheet {
  revision: LoadedRevision;
  /** How accuracies became uncertainties on this sheet. */
  accuracyPolicy: UncertaintyPolicy;
  analysis: Analysis;
  /** In working order. */
  lines: SheetLine[];
  progress: SheetProgress;
  /** All of the unit, over all revisions. */
  findings: FindingView[];
  files: FileView[];
}

export type { InstrumentKind };
