import type { Instance } from "./energise";
import type { Supply } from "./circuit";
import type { ElementOf } from "./energy-map";
import type { MapView } from "./map-view";
import type { Citation } from "./rule-set";
import type { UnitFacts } from "./unit-facts";

/** Highest voltage of a cell while charging, V, and lowest to discharge to. */
export const cellLimits: Record<
  Exclude<ElementOf<"battery">["chemistry"], "unknown">,
  { full: number; empty: number; nominal: number; citation: Citation }
> = {
  lifepo4: {
    full: 3.65,
    empty: 2.5,
    nominal: 3.2,
    citation: {
      standard: "cell maker's data",
      clause: "lithium iron phosphate",
      edition: "public page",
      mark: "V",
    },
  },
  "li-ion": {
    full: 4.2,
    empty: 3.0,
    nominal: 3.6,
    citation: {
      standard: "cell maker's data",
      clause: "lithium ion",
      edition: "public page",
      mark: "V",
      note: "3.0 V is practice.",
    },
  },
  "lead-acid": {
    full: 2.45,
    empty: 1.75,
    nominal: 2.0,
    citation: {
      standard: "maker's data",
      clause: "valve-regulated lead-acid, cyclic",
      edition: "public page",
      mark: "V",
    },
  },
  nimh: {
    full: 1.6,
    empty: 1.0,
    nominal: 1.2,
    citation: { standard: "trade practice", clause: "nickel metal hydride", edition: "none", mark: "M" },
  },
};

/** Highest voltage of a battery, V; `null` when chemistry or number of cells is not known. */
export function batteryFullVolts({ chemistry, cellsInSeries }: ElementOf<"battery">): number | null {
  return chemistry === "unknown" || cellsInSeries === null
    ? null
    : cellLimits[chemistry].full * cellsInSeries;
}

/** Highest voltage between a supply's poles, V (rms where it alternates); `null`: not known. */
export function suppliedVolts(view: MapView, supply: Supply, facts: UnitFacts): number | null {
  const element = view.elements.get(supply.element);
  if (supply.domain === "mains") {
    // An inverter may make a higher voltage than the mains of the country; never judge it by the lower one.
    if (element?.kind !== "converter") return facts.supplyVolts;
    return element.outputVolts === null ? null : Math.max(facts.supplyVolts, element.outputVolts);
  }
  switch (element?.kind) {
    case "battery":
      return batteryFullVolts(element);
    case "dc-inlet":
      return element.volts;
    case "isolated-supply":
    case "converter":
      return element.outputVolts;
    case "charger":
      return element.setPointVolts;
    case "transformer":
      return element.secondaryVolts;
    default:
      return null;
  }
}

/** Highest voltage at mains potential in a unit, V rms: the supply's, or that of an inverter in it if higher. */
export const highestMainsVolts = (view: MapView, facts: UnitFacts): number =>
  Math.max(
    facts.supplyVolts,
    ...view
      .ofKind("converter")
      .map(({ output, outputVolts }) => (output === "mains" ? (outputVolts ?? 0) : 0)),
  );

/**
 * What limits the current that a supply can give for long, A. `Infinity`: nothing does; `null`: not known.
 * `feedAmps` is what the devices before it let into it, which sets what a transformer can give.
 */
export function suppliedLimit(
  view: MapView,
  instance: Instance,
  facts: UnitFacts,
  feedAmps: number | null,
): number | null {
  const element = view.elements.get(instance.supply.element);
  // What flows out of an input backwards is not limited by the figure for the output.
  if (instance.parent?.transfer.mode === "backward") return null;
  switch (element?.kind) {
    case "mains-inlet":
      return element.upstreamAmps;
    case "battery":
      return Infinity;
    case "dc-inlet":
      return element.maxAmps;
    case "isolated-supply":
    case "charger":
    case "converter":
      return element.outputAmps;
    case "transformer":
      return feedAmps === null || element.secondaryVolts === null
        ? null
        : (feedAmps * facts.supplyVolts) / element.secondaryVolts;
    default:
      return null;
  }
}

/** Largest current of a dead short, A; `null`: not known. */
export function shortCircuitAmps(view: MapView, instance: Instance, limitAmps: number | null): number | null {
  const element = view.elements.get(instance.supply.element);
  switch (element?.kind) {
    case "mains-inlet":
      return element.prospectiveAmps;
    case "battery": {
      const volts = batteryFullVolts(element);
      return volts === null || element.internalMilliohms === null
        ? null
        : volts / (element.internalMilliohms / 1000);
    }
    case "transformer":
      // Short-circuit voltage of small transformers is 5 % or more (from memory).
      return element.voltAmperes === null || element.secondaryVolts === null
        ? null
        : element.voltAmperes / element.secondaryVolts / 0.05;
    default:
      return limitAmps;
  }
}
