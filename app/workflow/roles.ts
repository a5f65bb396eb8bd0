/** The five roles that a person can hold in a workshop. One person may hold several. */
export const roles = ["builder", "inspector", "electrician", "archivist", "steward"] as const;

export type Role = (typeof roles)[number];

export const roleTitles: Record<Role, string> = {
  builder: "Builder",
  inspector: "Inspector",
  electrician: "Electrician",
  archivist: "Archivist",
  steward: "Steward",
};

/** What each role does, in the words shown when somebody is invited. */
export const roleDuties: Record<Role, string> = {
  builder: "Describes units and their energy maps, answers findings, resubmits.",
  inspector: "Works the bench sheet: examines, measures, photographs, raises and closes findings.",
  electrician:
    "Licensed. Reviews and signs, signs with conditions, refuses or sends back; may withdraw later.",
  archivist: "Reads and searches every record and its trail. Changes none.",
  steward: "Runs the workshop: people, licences, instruments, policies. Alters no reading and no signature.",
};
