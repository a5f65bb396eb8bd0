import type { Circuit } from "./circuit";
import { isReached, walk } from "./energise";
import type { ElementOf } from "./energy-map";

export interface Protection {
  /** Protection boards that stand in both poles of the battery. */
  boards: string[];
  /** What uses or gives energy between the poles before any board, so that no board can part it. */
  bypassing: string[];
}

/** Boards that both poles of a battery lead to over wires, fuses and switches alone, with nothing between the poles before them. */
export function protectionOf(circuit: Circuit, battery: ElementOf<"battery">): Protection {
  const { view, links } = circuit;
  const isBoard = (id: string | null) => id !== null && view.elements.get(id)?.kind === "bms";
  const plain = Uint8Array.from(links, ({ kind, element, certainty }) =>
    certainty === "certain" &&
    (kind === "wire" || kind === "contact" || (kind === "protector" && !isBoard(element)))
      ? 2
      : 0,
  );
  const plus = walk(circuit, plain, view.nodeOf(battery.id, "+"), "either");
  const minus = walk(circuit, plain, view.nodeOf(battery.id, "-"), "either");
  const boards = view
    .ofKind("bms")
    .filter(({ id }) => isReached(plus, view.nodeOf(id, "B+")) && isReached(minus, view.nodeOf(id, "B-")))
    .map(({ id }) => id);
  const bypassing = links.flatMap(({ kind, element, a, b }) => {
    const across = (isReached(plus, a) && isReached(minus, b)) || (isReached(plus, b) && isReached(minus, a));
    return kind === "consumer" && element !== null && element !== battery.id && across ? [element] : [];
  });
  return { boards, bypassing: [...new Set(bypassing)] };
}
