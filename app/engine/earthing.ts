import type { Circuit } from "./circuit";

export interface Bonding {
  part: string;
  /** Joined to the inlet's earth pin by conductors and earth terminals alone. */
  bonded: boolean;
  /** Devices through which alone it is joined: an earth that can be opened. */
  through: string[];
  conductors: string[];
}

/** For each accessible part and earth terminal how it is joined to the earth pin of a mains inlet. */
export function bondingOf(circuit: Circuit): Map<string, Bonding> {
  const { view } = circuit;
  const pins = view
    .ofKind("mains-inlet")
    .map(({ id }) => view.nodeOf(id, "PE"))
    .filter((node) => node >= 0);
  const plain = spread(circuit, pins, (kind) => kind === "wire");
  const any = spread(
    circuit,
    pins,
    (kind) => kind === "wire" || kind === "protector" || kind === "contact" || kind === "diode",
  );
  const found = new Map<string, Bonding>();
  const targets = [
    ...view.ofKind("accessible-part").map(({ id }) => ({ id, node: view.nodeOf(id, "surface") })),
    ...view.ofKind("earth-terminal").map(({ id }) => ({ id, node: view.nodeOf(id, "PE") })),
  ];
  for (const { id, node } of targets) {
    const bonded = plain.has(node);
    const way = trace(circuit, bonded ? plain : any, node);
    found.set(id, { part: id, bonded, through: bonded ? [] : way.elements, conductors: way.conductors });
  }
  return found;
}

/** Devices that sit in a conductor marked as protective earth: none belongs there. */
export function devicesInEarth({ view }: Circuit): string[] {
  const interrupting = new Set(["switch", "fuse", "breaker", "thermal-cutout", "diode", "ideal-diode"]);
  const ids = view.wired
    .filter(({ circuit }) => circuit === "earth")
    .flatMap(({ from, to }) => [from.element, to.element])
    .filter((id) => interrupting.has(view.elements.get(id)?.kind ?? ""));
  return [...new Set(ids)];
}

function spread(circuit: Circuit, starts: number[], allowed: (kind: string) => boolean): Map<number, number> {
  const came = new Map<number, number>(starts.map((node) => [node, -1]));
  const queue = [...starts];
  for (let head = 0; head < queue.length; head++) {
    const node = queue[head];
    if (node === undefined) break;
    for (const index of circuit.linksAt[node] ?? []) {
      const link = circuit.links[index];
      if (link === undefined || !allowed(link.kind)) continue;
      const next = link.a === node ? link.b : link.a;
      if (came.has(next)) continue;
      came.set(next, index);
      queue.push(next);
    }
  }
  return came;
}

function trace(
  circuit: Circuit,
  came: Map<number, number>,
  node: number,
): { elements: string[]; conductors: string[] } {
  const elements: string[] = [];
  const conductors: string[] = [];
  let at = node;
  for (let guard = 0; guard <= came.size; guard++) {
    const link = circuit.links[came.get(at) ?? -1];
    if (link === undefined) break;
    if (link.element !== null) elements.unshift(link.element);
    if (link.conductor !== null) conductors.unshift(link.conductor);
    at = link.a === at ? link.b : link.a;
  }
  return { elements, conductors };
}
