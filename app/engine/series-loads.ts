import type { Circuit } from "./circuit";

/** Whether current can go from a node to one that is sought, through conducting links and loads but not through one element. */
export function leadsTo(
  circuit: Circuit,
  conducts: Uint8Array,
  start: number,
  exceptElement: string,
  isSought: (node: number) => boolean,
): boolean {
  const seen = new Set([start]);
  const queue = [start];
  for (let head = 0; head < queue.length; head++) {
    const node = queue[head];
    if (node === undefined) break;
    if (isSought(node)) return true;
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined || link.element === exceptElement) continue;
      if (link.kind !== "consumer" && conducts[index] === 0) continue;
      const next = link.a === node ? link.b : link.a;
      if (seen.has(next)) continue;
      seen.add(next);
      queue.push(next);
    }
  }
  return false;
}
