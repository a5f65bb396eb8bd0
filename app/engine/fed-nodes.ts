import type { Certainty } from "./analysis";
import type { Circuit } from "./circuit";
import { energise, isReached, settingsOf, type Instance } from "./energise";

/** Every energised pair of poles of a circuit, with everything switched on, each changeover in each position. */
export function energisedPairs(circuit: Circuit, certainty: Certainty = "certain"): Instance[] {
  return settingsOf(circuit, () => null).positions.flatMap((positions) =>
    circuit.sources.flatMap(
      (source) =>
        energise(circuit, source, { positions, includePossible: certainty === "possible" }).instances,
    ),
  );
}

/** Either pole of a pair reaches a node. */
export const holdsNode = ({ hot, ret }: Instance, node: number): boolean =>
  isReached(hot, node) || isReached(ret, node);
