/**
 * The people of the demo workshop, all invented. Their passwords are public and only ever put into a local
 * database that the start command made itself.
 */
export interface DemoPerson {
  name: string;
  email: string;
  roles: readonly ("builder" | "inspector" | "electrician" | "archivist" | "steward")[];
  password: string;
}

export const demoPeople: readonly DemoPerson[] = [
  { name: "Bruna Okafor", email: "bruna@demo.example", roles: ["builder"], password: "demo-builder-1" },
  { name: "Benno Talvik", email: "benno@demo.example", roles: ["builder"], password: "demo-builder-2" },
  {
    name: "Betje Amaral",
    email: "betje@demo.example",
    roles: ["builder", "inspector"],
    password: "demo-builder-3",
  },
  { name: "Ilse Moreau", email: "ilse@demo.example", roles: ["inspector"], password: "demo-inspector-1" },
  { name: "Idris Calloway", email: "idris@demo.example", roles: ["inspector"], password: "demo-inspector-2" },
  {
    name: "Elif Sandoval",
    email: "elif@demo.example",
    roles: ["electrician"],
    password: "demo-electrician-1",
  },
  {
    name: "Emeka Lindqvist",
    email: "emeka@demo.example",
    roles: ["electrician"],
    password: "demo-electrician-2",
  },
  { name: "Aurel Nakata", email: "aurel@demo.example", roles: ["archivist"], password: "demo-archivist-1" },
  {
    name: "Stina Varga",
    email: "stina@demo.example",
    roles: ["steward", "archivist"],
    password: "demo-steward-1",
  },
];
