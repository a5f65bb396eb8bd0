import type { UnitState } from "~/workflow/states";

/** What happens next with a unit and whose turn it is, in two sentences. */
export function nextStepFor(unit: { state: UnitState; isOwn: boolean }): { what: string; who: string } {
  switch (unit.state) {
    case "draft":
      return {
        what: "Being described.",
        who: unit.isOwn
          ? "Complete its energy map, add photos and submit it."
          : "Its builder completes the energy map and submits it.",
      };
    case "submitted":
      return {
        what: "Waits for the bench.",
        who: "An inspector who did not build it takes it. Until it is signed it must not be plugged in elsewhere.",
      };
    case "on_bench":
      return { what: "On the bench.", who: "Its inspector works the bench sheet." };
    case "awaiting_signature":
      return {
        what: "Waits for a signature.",
        who: "A licensed electrician who neither built nor inspected it reviews the sheet and decides.",
      };
    case "sent_back":
      return {
        what: "Sent back with findings.",
        who: unit.isOwn
          ? "Answer each finding, change the map where the unit changed, and submit it again."
          : "Its builder answers the findings and submits it again.",
      };
    case "signed":
      return {
        what: "Signed.",
        who: `It may be used under the conditions of its record, until its recheck date. Any change to it ends that: ${anew(unit.isOwn)}`,
      };
    case "refused":
      return {
        what: "Refused.",
        who: `It must not be plugged in; the record says why. To go on, ${anew(unit.isOwn)}`,
      };
    case "withdrawn":
      return {
        what: "The signature was withdrawn.",
        who: `It must not be plugged in; the record says why. To go on, ${anew(unit.isOwn)}`,
      };
    case "superseded":
      return {
        what: "Superseded.",
        who: "Its new version was signed in its place. If the old one still exists, it must not be plugged in.",
      };
  }
}

/** What can be done with a decided unit, whether or not it has been begun. */
function anew(isOwn: boolean): string {
  return `changes are made in a new version of it, which ${isOwn ? "you start" : "its builder starts"} on this page.`;
}
