import type { CheckDefinition } from "./bench-check";
import { battery } from "./checks/battery";
import { circuitsApart } from "./checks/circuits-apart";
import { doublePoleIsolation } from "./checks/double-pole-isolation";
import { fusing } from "./checks/fusing";
import { heat } from "./checks/heat";
import { insulation } from "./checks/insulation";
import { leakage } from "./checks/leakage";
import { marking } from "./checks/marking";
import { operation } from "./checks/operation";
import { partsAlone } from "./checks/parts-alone";
import { protectiveEarth } from "./checks/protective-earth";
import { reverseCurrent } from "./checks/reverse-current";
import { storedCharge } from "./checks/stored-charge";
import { visualOutside } from "./checks/visual-outside";
import { visualWiring } from "./checks/visual-wiring";

/**
 * Every check, in the order in which a bench is worked: eyes first, then with the plug pulled, then live, function last.
 * To add one, write a file in `checks/` and put it here where it belongs.
 */
export const checkRegistry: CheckDefinition[] = [
  visualOutside,
  visualWiring,
  marking,
  fusing,
  partsAlone,
  battery,
  protectiveEarth,
  circuitsApart,
  insulation,
  doublePoleIsolation,
  storedCharge,
  reverseCurrent,
  leakage,
  heat,
  operation,
];
