import { transitions, type TransitionName } from "~/workflow/transitions";

/** What was done, for people; an act without words of its own is shown by its name. */
const words: Record<string, string> = {
  "unit.create": "created it",
  "unit.edit": "changed its description",
  "unit.succeed": "started a new version of it",
  "unit.hand-over": "handed it to another builder",
  "unit.discard": "discarded it",
  "bench.observe": "recorded a reading or answer",
  "bench.work": "worked on the sheet",
  "bench.carry-over": "carried earlier readings over",
  "finding.raise": "raised a finding",
  "finding.close": "closed a finding",
  "finding.answer": "answered a finding",
  "file.add": "added a file",
  "file.remove": "took a file back",
  "file.restore": "brought a file back",
  "file.caption": "changed a caption",
  "record.pdf-made": "made the PDF of the record",
};

export function actWords(act: string): string {
  const name = act.replace(/^unit\./, "");
  return isTransition(name) ? transitions[name].told : (words[act] ?? act);
}

function isTransition(name: string): name is TransitionName {
  return name in transitions;
}
