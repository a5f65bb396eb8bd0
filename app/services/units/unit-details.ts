/** What a builder says about a unit beside its map. Null means not known. */
export interface UnitDetails {
  name: string;
  purpose: string;
  placeOfUse: string;
  supplyVolts: number;
  supplyHertz: number;
  protectionClass: "I" | "II";
  cordLengthM: number | null;
  cordAreaMm2: number | null;
  handheld: boolean | null;
  altitudeM: number | null;
}
