import { createContext } from "react-router";
import type { Role } from "~/workflow/roles";

export interface SignedInPerson {
  id: number;
  name: string;
  email: string;
}

export interface CurrentWorkshop {
  id: number;
  slug: string;
  name: string;
  timeZone: string;
  isDemo: boolean;
  ruleSetKey: string;
  ruleSetVersion: string;
  accuracyPolicy: "rect" | "maker-k2";
  recheckMonths: number;
  /** Roles that the signed-in person holds here; never empty. */
  roles: readonly Role[];
}

/** Set by the server entry for every request. */
export const requestIdContext = createContext<string>();
export const cspNonceContext = createContext<string>();
/** Address of the client, as far as the trusted proxy tells. */
export const clientAddressContext = createContext<string>();

/** Set by middleware/session.server.ts: null when nobody is signed in. */
export const personContext = createContext<SignedInPerson | null>(null);

/** Set by middleware/workshop.server.ts on every route below /w/:workshop. */
export const workshopContext = createContext<CurrentWorkshop>();
