/** Something missing or contradictory in a map or in the unit's facts. */
export interface Problem {
  /** The element or conductor that it is about; `null` for the map as a whole or the unit's facts. */
  subject: { kind: "element" | "conductor"; id: string } | null;
  /** The field to be filled in or corrected, as named in the schema; `null` when no single one. */
  field: string | null;
  /** A sentence for the builder. */
  text: string;
  /** While there is one of these, the map cannot be submitted. */
  blocking: boolean;
}
