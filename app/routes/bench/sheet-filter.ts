import { isDecided, type LineVerdict } from "~/engine/bench-answer";

export const shows = ["all", "to-do", "pass", "fail", "undecided", "photo-missing"] as const;
/** Which lines of the sheet are shown. */
export type Show = (typeof shows)[number];

export const showWords: Record<Show, string> = {
  all: "All",
  "to-do": "To do",
  pass: "Passed",
  fail: "Failed",
  undecided: "Undecided",
  "photo-missing": "Photo missing",
};

/** The filter in the address; anything unknown shows all. */
export function parseShow(text: string | null): Show {
  return shows.find((show) => show === text) ?? "all";
}

export function isShown(line: { verdict: LineVerdict; photoMissing: boolean }, show: Show): boolean {
  switch (show) {
    case "all":
      return true;
    case "to-do":
      return !isDecided(line.verdict) || line.photoMissing;
    case "pass":
    case "fail":
    case "undecided":
      return line.verdict === show;
    case "photo-missing":
      return line.photoMissing;
  }
}
