import { elementSchema, type Element, type ElementKind, type ElementOf } from "./energy-map";

export type TerminalRole = "line" | "neutral" | "earth" | "plus" | "minus" | "any";

export interface Terminal {
  name: string;
  label: string;
  role: TerminalRole;
  /** Which way energy is meant to pass: in at "in", out at "out"; "both" where neither is meant. */
  side: "in" | "out" | "both";
}

const terminal = (name: string, label: string, role: TerminalRole, side: Terminal["side"]): Terminal => ({
  name,
  label,
  role,
  side,
});

const mainsPair = (side: "in" | "out"): Terminal[] => [
  terminal("L", "Line", "line", side),
  terminal("N", "Neutral", "neutral", side),
];
const directPair = (side: "in" | "out", plus: string, minus: string): Terminal[] => [
  terminal(plus, side === "in" ? "Input +" : "Output +", "plus", side),
  terminal(minus, side === "in" ? "Input −" : "Output −", "minus", side),
];
const twoEnds: Terminal[] = [terminal("1", "End 1", "any", "both"), terminal("2", "End 2", "any", "both")];
const consumerPair = (supply: "mains" | "dc"): Terminal[] =>
  supply === "mains"
    ? mainsPair("in")
    : [terminal("+", "+", "plus", "in"), terminal("-", "−", "minus", "in")];

/** The terminals of an element, in drawing order. Names are stable: conductors refer to them. */
export function terminalsOf(element: Element): Terminal[] {
  switch (element.kind) {
    case "mains-inlet":
      return [
        ...mainsPair("out"),
        ...(element.earthPin === "no" ? [] : [terminal("PE", "Protective earth", "earth", "both")]),
      ];
    case "battery":
    case "dc-inlet":
      return [terminal("+", "+", "plus", "out"), terminal("-", "−", "minus", "out")];
    case "isolated-supply":
      return [
        ...mainsPair("in"),
        terminal("PE", "Protective earth", "earth", "both"),
        ...directPair("out", "+", "-"),
      ];
    case "transformer":
      return [
        ...mainsPair("in"),
        terminal("S1", "Secondary 1", "any", "out"),
        terminal("S2", "Secondary 2", "any", "out"),
      ];
    case "charger":
      return [
        ...(element.supply === "mains"
          ? [...mainsPair("in"), terminal("PE", "Protective earth", "earth", "both")]
          : directPair("in", "in+", "in-")),
        ...directPair("out", "+", "-"),
      ];
    case "converter":
      return [
        ...directPair("in", "in+", "in-"),
        ...(element.output === "mains" ? mainsPair("out") : directPair("out", "+", "-")),
      ];
    case "fuse":
    case "thermal-cutout":
    case "x-capacitor":
    case "y-capacitor":
    case "bleeder":
      return twoEnds;
    case "breaker":
      return Array.from({ length: element.poles }, (_, index) => index + 1).flatMap((pole) => [
        terminal(`${pole}a`, `Pole ${pole} in`, "any", "both"),
        terminal(`${pole}b`, `Pole ${pole} out`, "any", "both"),
      ]);
    case "bms":
      return [
        terminal("B+", "Cells +", "plus", "both"),
        terminal("B-", "Cells −", "minus", "both"),
        terminal("P+", "Pack +", "plus", "both"),
        terminal("P-", "Pack −", "minus", "both"),
      ];
    case "switch":
      return Array.from({ length: element.poles }, (_, index) => index + 1).flatMap((pole) =>
        element.throw === "single"
          ? [
              terminal(`${pole}a`, `Pole ${pole} in`, "any", "both"),
              terminal(`${pole}b`, `Pole ${pole} out`, "any", "both"),
            ]
          : [
              terminal(`${pole}c`, `Pole ${pole} common`, "any", "both"),
              terminal(`${pole}a`, `Pole ${pole}, joined when on`, "any", "both"),
              terminal(`${pole}b`, `Pole ${pole}, joined when off`, "any", "both"),
            ],
      );
    case "diode":
      return [terminal("A", "Anode", "any", "in"), terminal("K", "Cathode", "any", "out")];
    case "ideal-diode":
      return [terminal("in", "Input", "any", "in"), terminal("out", "Output", "any", "out")];
    case "load":
    case "fan":
      return consumerPair(element.supply);
    case "outlet":
      return element.supply === "mains"
        ? [...mainsPair("in"), terminal("PE", "Protective earth", "earth", "both")]
        : consumerPair("dc");
    case "indicator":
      return [terminal("1", "+ or line", "any", "in"), terminal("2", "− or neutral", "any", "in")];
    case "accessible-part":
      return [terminal("surface", "Surface", "any", "both")];
    case "earth-terminal":
      return [terminal("PE", "Protective earth", "earth", "both")];
  }
}

type DataName<Kind extends ElementKind> = Exclude<keyof ElementOf<Kind>, "id" | "label" | "kind"> & string;

export interface FieldDescriptor<Name extends string = string> {
  name: Name;
  label: string;
  /** Printed after the number; `null` for none. */
  unit: string | null;
  type: "number" | "choice" | "text" | "boolean";
  choices?: { value: string; label: string }[];
  hint: string;
  /** An empty input means "not known" and is stored as `null`. */
  nullable: boolean;
}

export interface KindDescriptor<Kind extends ElementKind = ElementKind> {
  kind: Kind;
  label: string;
  /** Letter that ids of this kind usually begin with. */
  idPrefix: string;
  group: "source" | "change" | "protect" | "switch" | "use" | "suppress" | "earth";
  hint: string;
  fields: FieldDescriptor<DataName<Kind>>[];
}

const yesNo = [
  { value: "unknown", label: "Not known" },
  { value: "yes", label: "Yes" },
  { value: "no", label: "No" },
];
const supplies = [
  { value: "mains", label: "Mains (alternating)" },
  { value: "dc", label: "Extra-low direct voltage" },
];
const grades = [
  { value: "unknown", label: "Not known" },
  { value: "none", label: "None: input and output are joined" },
  { value: "functional", label: "Functional only" },
  { value: "basic", label: "Basic" },
  { value: "reinforced", label: "Double or reinforced" },
];

const number = <Name extends string>(
  name: Name,
  label: string,
  unit: string | null,
  hint: string,
): FieldDescriptor<Name> => ({
  name,
  label,
  unit,
  type: "number",
  hint,
  nullable: true,
});
const count = <Name extends string>(name: Name, label: string, hint: string): FieldDescriptor<Name> => ({
  ...number(name, label, null, hint),
  nullable: false,
});
const choice = <Name extends string>(
  name: Name,
  label: string,
  choices: { value: string; label: string }[],
  hint: string,
): FieldDescriptor<Name> => ({ name, label, unit: null, type: "choice", choices, hint, nullable: false });
const question = <Name extends string>(name: Name, label: string, hint: string) =>
  choice(name, label, yesNo, hint);
const same = (...values: string[]) => [
  { value: "unknown", label: "Not known" },
  ...values.map((value) => ({ value, label: value })),
];

const backwards = question(
  "conductsBackwards",
  "Conducts backwards",
  "Can energy put into its output come out of its input? Synchronous converters often do. Say not known if the data sheet is silent.",
);
const acVolts = number(
  "acVolts",
  "Rated voltage, AC",
  "V",
  "As marked. 0 if the maker gives no AC rating; empty if not known.",
);
const dcVolts = number(
  "dcVolts",
  "Rated voltage, DC",
  "V",
  "As marked. 0 if the maker gives no DC rating; empty if not known.",
);
const ratingAmps = number("ratingAmps", "Rated current", "A", "As marked on the part.");
const breakingAmps = number(
  "breakingAmps",
  "Breaking capacity",
  "A",
  "Largest fault current it can clear, from the data sheet.",
);
const inputAmps = number(
  "inputAmps",
  "Input current",
  "A",
  "Largest current it draws, from its plate or data sheet.",
);
const leakage = number(
  "leakageMilliamps",
  "Earth leakage",
  "mA",
  "From the data sheet. 0 if nothing in it is joined to earth.",
);
const consumerSupply = choice("supply", "Fed by", supplies, "Which kind of voltage it uses.");

/** Per kind of element: its words for people and its fields, so that a form can be made from data. */
export const elementKinds: { [Kind in ElementKind]: KindDescriptor<Kind> } = {
  "mains-inlet": {
    kind: "mains-inlet",
    label: "Mains inlet",
    idPrefix: "X",
    group: "source",
    hint: "Where mains enters: a fixed cord with plug, or an appliance inlet.",
    fields: [
      question("earthPin", "Has an earth pin", "Yes for class I; no for a two-pin class II inlet."),
      question(
        "polarised",
        "Polarised plug",
        "Yes only if the plug fits one way round. No for reversible plugs; then either pole may be line.",
      ),
      number(
        "upstreamAmps",
        "Fuse in the plug or breaker before it",
        "A",
        "Rating of the plug's fuse; without one, of the breaker that feeds the socket (often 16 A).",
      ),
      number(
        "prospectiveAmps",
        "Prospective short-circuit current",
        "A",
        "Largest current a dead short at the socket would draw: supply voltage divided by loop impedance.",
      ),
    ],
  },
  battery: {
    kind: "battery",
    label: "Battery pack",
    idPrefix: "BT",
    group: "source",
    hint: "Cells without their protection board; add the board as a BMS element.",
    fields: [
      choice(
        "chemistry",
        "Chemistry",
        [
          { value: "unknown", label: "Not known" },
          { value: "lead-acid", label: "Lead-acid" },
          { value: "lifepo4", label: "Lithium iron phosphate" },
          { value: "li-ion", label: "Lithium ion (NMC, NCA, LCO)" },
          { value: "nimh", label: "Nickel metal hydride" },
        ],
        "Sets the charging limits.",
      ),
      number("cellsInSeries", "Cells in series", null, "A 12 V lead-acid block has 6."),
      number("stringsInParallel", "Strings in parallel", null, "1 if all cells are in one string."),
      number("capacityAh", "Capacity", "Ah", "As marked on the pack."),
      number(
        "internalMilliohms",
        "Internal resistance",
        "mΩ",
        "Of the whole pack at its terminals; sets the fault current.",
      ),
      number("maxDischargeAmps", "Largest discharge current", "A", "Continuous, from the maker."),
      number("maxChargeAmps", "Largest charging current", "A", "From the maker."),
    ],
  },
  "dc-inlet": {
    kind: "dc-inlet",
    label: "DC inlet",
    idPrefix: "J",
    group: "source",
    hint: "A socket for a plug-in adapter, solar panel or other direct voltage.",
    fields: [
      number("volts", "Voltage", "V", "Largest voltage of the source meant for it."),
      number("maxAmps", "Largest current of that source", "A", "What the adapter can give at most."),
      question(
        "touchable",
        "Contacts can be touched",
        "With nothing plugged in, can a finger or a loose plug touch both contacts?",
      ),
    ],
  },
  "isolated-supply": {
    kind: "isolated-supply",
    label: "Mains power supply",
    idPrefix: "PS",
    group: "change",
    hint: "A module that makes extra-low voltage from mains.",
    fields: [
      choice("insulation", "Insulation, input to output", grades, "As stated by its maker."),
      inputAmps,
      number("outputVolts", "Output voltage", "V", "As set."),
      number("outputAmps", "Output current limit", "A", "The most it gives before it limits or shuts down."),
      backwards,
      leakage,
    ],
  },
  transformer: {
    kind: "transformer",
    label: "Transformer",
    idPrefix: "T",
    group: "change",
    hint: "With separate windings. For an autotransformer choose insulation: none.",
    fields: [
      choice("insulation", "Insulation between windings", grades, "As stated by its maker."),
      number("secondaryVolts", "Secondary voltage", "V", "Rated, rms."),
      number("voltAmperes", "Rated power", "VA", "As marked."),
    ],
  },
  charger: {
    kind: "charger",
    label: "Charger",
    idPrefix: "CH",
    group: "change",
    hint: "Charges the battery, from mains or from direct voltage.",
    fields: [
      choice("supply", "Fed by", supplies, "Changes its input terminals."),
      choice("insulation", "Insulation, input to output", grades, "None if input − and output − are joined."),
      inputAmps,
      number("setPointVolts", "Charging voltage", "V", "Measured or set at its output, charge finished."),
      number("outputAmps", "Charging current limit", "A", "The most it gives."),
      backwards,
      leakage,
    ],
  },
  converter: {
    kind: "converter",
    label: "Converter or inverter",
    idPrefix: "U",
    group: "change",
    hint: "From direct voltage to another direct voltage, or to mains-like voltage.",
    fields: [
      choice("output", "Gives", supplies, "Changes its output terminals."),
      choice("insulation", "Insulation, input to output", grades, "None if input − and output − are joined."),
      inputAmps,
      number("outputVolts", "Output voltage", "V", "As set."),
      number("outputAmps", "Output current limit", "A", "The most it gives before it limits."),
      backwards,
    ],
  },
  fuse: {
    kind: "fuse",
    label: "Fuse",
    idPrefix: "F",
    group: "protect",
    hint: "Draw the one in the plug too if there is one inside the unit's cord.",
    fields: [
      choice(
        "standard",
        "Type",
        [
          { value: "unknown", label: "Not known" },
          { value: "iec-60127", label: "Miniature, IEC 60127" },
          { value: "ul-248-14", label: "Miniature, UL 248-14" },
          { value: "bs-1362", label: "Plug fuse, BS 1362" },
          { value: "blade", label: "Blade, ISO 8820-3" },
          { value: "bolt-down", label: "Bolt-down strip" },
          { value: "class-t", label: "Class T" },
          { value: "other", label: "Other" },
        ],
        "A UL and an IEC fuse of the same rating are not interchangeable.",
      ),
      choice("speed", "Speed", same("FF", "F", "M", "T", "TT", "other"), "Letter on the cap."),
      choice(
        "breakingLetter",
        "Breaking-capacity letter",
        same("L", "E", "H", "none"),
        "L is low (glass), H is high (sand-filled).",
      ),
      ratingAmps,
      breakingAmps,
      acVolts,
      dcVolts,
    ],
  },
  breaker: {
    kind: "breaker",
    label: "Circuit breaker",
    idPrefix: "Q",
    group: "protect",
    hint: "Trips on too much current; all its poles open together.",
    fields: [
      count("poles", "Poles", "1 to 4; changes its terminals."),
      choice(
        "curve",
        "Curve",
        same("B", "C", "D", "K", "Z", "thermal", "other"),
        "Letter before the rating.",
      ),
      ratingAmps,
      breakingAmps,
      acVolts,
      dcVolts,
    ],
  },
  "thermal-cutout": {
    kind: "thermal-cutout",
    label: "Thermal cut-out",
    idPrefix: "TC",
    group: "protect",
    hint: "Opens when hot.",
    fields: [
      number("temperatureC", "Opens at", "°C", "As marked."),
      choice(
        "reset",
        "Resets",
        [
          { value: "unknown", label: "Not known" },
          { value: "none", label: "Never: replaced" },
          { value: "manual", label: "By hand" },
          { value: "automatic", label: "By itself" },
        ],
        "How it comes back.",
      ),
      ratingAmps,
      acVolts,
      dcVolts,
    ],
  },
  bms: {
    kind: "bms",
    label: "Battery protection (BMS)",
    idPrefix: "BM",
    group: "protect",
    hint: "The board between the cells and everything else. It does not replace a fuse.",
    fields: [
      number(
        "overVoltsPerCell",
        "Over-voltage trip, per cell",
        "V",
        "From its data sheet. It is not the charging limit.",
      ),
      number("underVoltsPerCell", "Under-voltage trip, per cell", "V", "From its data sheet."),
      number("tripAmps", "Over-current trip", "A", "From its data sheet."),
      question(
        "coldChargeCutoff",
        "Stops charging when cold",
        "Lithium cells must not be charged below 0 °C.",
      ),
    ],
  },
  switch: {
    kind: "switch",
    label: "Switch or relay contact",
    idPrefix: "S",
    group: "switch",
    hint: "One element is one body: all its poles move together. The circuit of each pole follows from its connections.",
    fields: [
      count("poles", "Poles", "1 to 4; changes its terminals."),
      choice(
        "throw",
        "Contacts",
        [
          { value: "single", label: "On and off" },
          { value: "changeover", label: "Changeover" },
        ],
        "A changeover pole joins its common to one of two contacts.",
      ),
      choice(
        "actuator",
        "Moved by",
        [
          { value: "hand", label: "Hand" },
          { value: "relay", label: "Relay coil" },
          { value: "contactor", label: "Contactor coil" },
        ],
        "A relay contact can weld shut.",
      ),
      choice(
        "promise",
        "What off promises",
        [
          { value: "unknown", label: "Not known" },
          { value: "isolation", label: "Isolation: safe to work behind it" },
          { value: "function", label: "Function only: the unit stops" },
        ],
        "What a person at the unit would believe from its marking.",
      ),
      {
        name: "coilFedBy",
        label: "Coil fed by",
        unit: null,
        type: "text",
        hint: "For a relay: id of the source that pulls it in. Empty if not known or not a relay.",
        nullable: true,
      },
      number("gapMm", "Contact gap", "mm", "Smallest gap of an open pole. A µ mark means no full gap."),
      acVolts,
      number("acAmps", "Rated current, AC", "A", "As marked; 0 if none given."),
      dcVolts,
      number("dcAmps", "Rated current, DC", "A", "As marked; 0 if none given."),
      question(
        "reinforcedBetweenPoles",
        "Reinforced insulation between poles",
        "Only if the maker states it.",
      ),
    ],
  },
  diode: {
    kind: "diode",
    label: "Diode",
    idPrefix: "D",
    group: "protect",
    hint: "Lets current pass from anode to cathode.",
    fields: [
      number("ratedAmps", "Rated current", "A", "Average forward current."),
      number("reverseVolts", "Reverse voltage", "V", "Largest repetitive reverse voltage."),
      number("forwardVolts", "Forward drop", "V", "At the working current."),
      number(
        "leakageMicroamps",
        "Reverse leakage at 25 °C",
        "µA",
        "From the data sheet; Schottky diodes leak more, and more when hot.",
      ),
    ],
  },
  "ideal-diode": {
    kind: "ideal-diode",
    label: "Ideal-diode controller",
    idPrefix: "DI",
    group: "protect",
    hint: "A transistor that acts as a diode.",
    fields: [
      number("ratedAmps", "Rated current", "A", "Continuous."),
      number("maxVolts", "Largest voltage", "V", "Across it when blocking."),
      question("blocksReverse", "Blocks reverse current", "Some load switches look alike and do not."),
    ],
  },
  load: {
    kind: "load",
    label: "Load",
    idPrefix: "LD",
    group: "use",
    hint: "What the energy is for: lamp, motor, amplifier, heater.",
    fields: [
      consumerSupply,
      number("amps", "Current", "A", "Largest steady current it draws."),
      question("heating", "Heating element", "Some limits differ for heaters."),
    ],
  },
  outlet: {
    kind: "outlet",
    label: "Output connector",
    idPrefix: "XO",
    group: "use",
    hint: "Where other equipment is plugged in: mains outlet, terminals, USB.",
    fields: [
      consumerSupply,
      number("maxAmps", "Largest current", "A", "What may be drawn from it."),
      question("touchable", "Contacts can be touched", "By a finger, with nothing plugged in."),
    ],
  },
  fan: {
    kind: "fan",
    label: "Fan",
    idPrefix: "M",
    group: "use",
    hint: "Moves air inside the unit.",
    fields: [consumerSupply, number("amps", "Current", "A", "Largest steady current.")],
  },
  indicator: {
    kind: "indicator",
    label: "Indicator lamp",
    idPrefix: "H",
    group: "use",
    hint: "With its series resistor, as one element.",
    fields: [
      choice(
        "lamp",
        "Lamp",
        [
          { value: "unknown", label: "Not known" },
          { value: "led", label: "LED" },
          { value: "neon", label: "Neon" },
          { value: "filament", label: "Filament" },
        ],
        "An LED lights one way round only.",
      ),
      choice(
        "meaning",
        "Says when lit",
        [
          { value: "unknown", label: "Not known" },
          { value: "mains-present", label: "Mains is present" },
          { value: "dc-input-present", label: "The DC input is present" },
          { value: "battery-connected", label: "The battery is connected" },
          { value: "charging", label: "Charging" },
          { value: "output-on", label: "The output is on" },
          { value: "other", label: "Something else" },
        ],
        "What a person reads from it.",
      ),
      number("amps", "Current", "A", "A few milliamperes for an LED: 0.005."),
    ],
  },
  "x-capacitor": {
    kind: "x-capacitor",
    label: "X capacitor",
    idPrefix: "CX",
    group: "suppress",
    hint: "Between line and neutral.",
    fields: [
      number("nanofarads", "Capacitance", "nF", "100 nF is 0.1 µF."),
      choice("safetyClass", "Class", same("X1", "X2", "none"), "As marked."),
    ],
  },
  "y-capacitor": {
    kind: "y-capacitor",
    label: "Y capacitor",
    idPrefix: "CY",
    group: "suppress",
    hint: "Between a mains pole and earth, or across insulation.",
    fields: [
      number("nanofarads", "Capacitance", "nF", "4.7 nF is 4700 pF."),
      choice("safetyClass", "Class", same("Y1", "Y2", "none"), "As marked."),
    ],
  },
  bleeder: {
    kind: "bleeder",
    label: "Bleeder resistor",
    idPrefix: "R",
    group: "suppress",
    hint: "Discharges a capacitor after unplugging.",
    fields: [number("kilohms", "Resistance", "kΩ", "1000 kΩ is 1 MΩ. Sum of resistors in series.")],
  },
  "accessible-part": {
    kind: "accessible-part",
    label: "Accessible conductive part",
    idPrefix: "MP",
    group: "earth",
    hint: "Metal that a person can touch: case, panel, heat sink, screw.",
    fields: [
      number("clearanceMm", "Gap to mains parts through air", "mm", "Smallest, measured."),
      number("creepageMm", "Way to mains parts over surfaces", "mm", "Shortest, measured."),
      question(
        "reinforcedFromMains",
        "Double insulated from mains",
        "Double or reinforced insulation lies between it and every mains part.",
      ),
    ],
  },
  "earth-terminal": {
    kind: "earth-terminal",
    label: "Protective-earth terminal",
    idPrefix: "PE",
    group: "earth",
    hint: "Where the protective conductors meet.",
    fields: [
      question(
        "lockedFixing",
        "Own locked fixing",
        "A stud of its own with a locked nut, holding nothing else.",
      ),
    ],
  },
};

export const elementKindList: ElementKind[] = elementSchema.options.map((option) => option.shape.kind.value);

/** A new element of a kind with every datum unknown. Structure that must be something starts at its simplest. */
export function newElement(kind: ElementKind, id: string): Element {
  const base = { id, label: "" };
  const ratings = { ratingAmps: null, acVolts: null, dcVolts: null };
  switch (kind) {
    case "mains-inlet":
      return {
        ...base,
        kind,
        earthPin: "unknown",
        polarised: "unknown",
        upstreamAmps: null,
        prospectiveAmps: null,
      };
    case "battery":
      return {
        ...base,
        kind,
        chemistry: "unknown",
        cellsInSeries: null,
        stringsInParallel: null,
        capacityAh: null,
        internalMilliohms: null,
        maxDischargeAmps: null,
        maxChargeAmps: null,
      };
    case "dc-inlet":
      return { ...base, kind, volts: null, maxAmps: null, touchable: "unknown" };
    case "isolated-supply":
      return {
        ...base,
        kind,
        insulation: "unknown",
        inputAmps: null,
        outputVolts: null,
        outputAmps: null,
        conductsBackwards: "unknown",
        leakageMilliamps: null,
      };
    case "transformer":
      return { ...base, kind, insulation: "unknown", secondaryVolts: null, voltAmperes: null };
    case "charger":
      return {
        ...base,
        kind,
        supply: "mains",
        insulation: "unknown",
        inputAmps: null,
        setPointVolts: null,
        outputAmps: null,
        conductsBackwards: "unknown",
        leakageMilliamps: null,
      };
    case "converter":
      return {
        ...base,
        kind,
        output: "dc",
        insulation: "unknown",
        inputAmps: null,
        outputVolts: null,
        outputAmps: null,
        conductsBackwards: "unknown",
      };
    case "fuse":
      return {
        ...base,
        kind,
        standard: "unknown",
        speed: "unknown",
        breakingLetter: "unknown",
        breakingAmps: null,
        ...ratings,
      };
    case "breaker":
      return { ...base, kind, poles: 1, curve: "unknown", breakingAmps: null, ...ratings };
    case "thermal-cutout":
      return { ...base, kind, temperatureC: null, reset: "unknown", ...ratings };
    case "bms":
      return {
        ...base,
        kind,
        overVoltsPerCell: null,
        underVoltsPerCell: null,
        tripAmps: null,
        coldChargeCutoff: "unknown",
      };
    case "switch":
      return {
        ...base,
        kind,
        poles: 1,
        throw: "single",
        actuator: "hand",
        promise: "unknown",
        coilFedBy: null,
        gapMm: null,
        acVolts: null,
        acAmps: null,
        dcVolts: null,
        dcAmps: null,
        reinforcedBetweenPoles: "unknown",
      };
    case "diode":
      return {
        ...base,
        kind,
        ratedAmps: null,
        reverseVolts: null,
        forwardVolts: null,
        leakageMicroamps: null,
      };
    case "ideal-diode":
      return { ...base, kind, ratedAmps: null, maxVolts: null, blocksReverse: "unknown" };
    case "load":
      return { ...base, kind, supply: "dc", amps: null, heating: "unknown" };
    case "outlet":
      return { ...base, kind, supply: "dc", maxAmps: null, touchable: "unknown" };
    case "fan":
      return { ...base, kind, supply: "dc", amps: null };
    case "indicator":
      return { ...base, kind, lamp: "unknown", meaning: "unknown", amps: null };
    case "x-capacitor":
    case "y-capacitor":
      return { ...base, kind, nanofarads: null, safetyClass: "unknown" };
    case "bleeder":
      return { ...base, kind, kilohms: null };
    case "accessible-part":
      return { ...base, kind, clearanceMm: null, creepageMm: null, reinforcedFromMains: "unknown" };
    case "earth-terminal":
      return { ...base, kind, lockedFixing: "unknown" };
  }
}

/**
 * Sets one datum from a form's text. Empty text is "not known" where the field may be unknown.
 * Returns the changed element, or a sentence that says what is wrong; the given element is not changed.
 */
export function withField(
  element: Element,
  name: string,
  raw: string,
): { ok: true; element: Element } | { ok: false; message: string } {
  const field: FieldDescriptor | undefined = elementKinds[element.kind].fields.find(
    (each) => each.name === name,
  );
  if (field === undefined) return { ok: false, message: `There is no field ${name} here.` };
  const text = raw.trim();
  let value: unknown = text;
  if (text === "" && field.nullable) value = null;
  else if (field.type === "number") value = text === "" ? Number.NaN : Number(text.replace(",", "."));
  const parsed = elementSchema.safeParse({ ...element, [name]: value });
  if (parsed.success) return { ok: true, element: parsed.data };
  return { ok: false, message: parsed.error.issues[0]?.message ?? "This value is not possible here." };
}
