import { z } from "zod";
import { checkFamilies } from "~/engine/bench-check";
import { lineVerdicts } from "~/engine/bench-answer";
import { energyMapSchema } from "~/engine/energy-map";
import { unitFactsSchema } from "~/engine/unit-facts";

/**
 * The record of a decision: everything that it rested on, as data. Written once, as RFC 8785 canonical JSON, in the
 * transaction of the decision; its SHA-256 names it. Moments are UTC, days are those of the workshop's time zone.
 * A change of this shape is a new `version`; old ones stay readable.
 */

const moment = z.iso.datetime();
const day = z.iso.date();
const sha256 = z.string().regex(/^[0-9a-f]{64}$/);

const citationSchema = z.object({
  standard: z.string(),
  clause: z.string(),
  edition: z.string(),
  /** V a public page says so, M from memory and to be checked against the workshop's own copy, C computed. */
  mark: z.enum(["V", "M", "C"]),
  note: z.string().optional(),
});

const limitSchema = z.discriminatedUnion("kind", [
  z.object({
    kind: z.enum(["at-most", "at-least"]),
    value: z.number(),
    unit: z.string(),
    citation: citationSchema,
  }),
  z.object({
    kind: z.literal("between"),
    lower: z.number(),
    upper: z.number(),
    unit: z.string(),
    citation: citationSchema,
  }),
]);

const reasonSchema = z.object({
  text: z.string(),
  elements: z.array(z.string()),
  conductors: z.array(z.string()),
});

const observationSchema = z.object({
  kind: z.enum(["measured", "examined", "not-applicable", "not-possible"]),
  value: z.number().nullable(),
  bound: z.enum(["over", "under"]).nullable(),
  unit: z.string().nullable(),
  conforms: z.boolean().nullable(),
  conditions: z.string(),
  reason: z.string().nullable(),
  note: z.string().nullable(),
  instrument: z
    .object({ name: z.string(), serial: z.string(), kind: z.string(), calibrationDue: day })
    .nullable(),
  /** As stated by the maker at that value, in the reading's unit. */
  accuracy: z.object({ percent: z.number(), digits: z.number(), resolution: z.number() }).nullable(),
  by: z.string(),
  at: moment,
  /** Revision on which it was taken. */
  revision: z.number().int(),
  corrects: z.boolean(),
  carriedOver: z.object({ by: z.string(), at: moment }).nullable(),
});

const checkSchema = z.object({
  key: z.string(),
  family: z.enum(checkFamilies),
  title: z.string(),
  why: z.array(reasonSchema),
  method: z.array(z.string()),
  cautions: z.array(z.string()),
  citations: z.array(citationSchema),
  subjects: z.object({ elements: z.array(z.string()), conductors: z.array(z.string()) }),
  asks: z.discriminatedUnion("kind", [
    z.object({ kind: z.literal("reading"), quantity: z.string(), unit: z.string(), limit: limitSchema }),
    z.object({
      kind: z.literal("examination"),
      question: z.string(),
      conforms: z.string(),
      doesNot: z.string(),
    }),
  ]),
  /** The engine's own answer from the map; null where only the bench can tell. */
  computed: z
    .object({ verdict: z.enum(["pass", "fail", "unknown"]), reasons: z.array(reasonSchema) })
    .nullable(),
  /** The reading against the limit. `expandedUncertainty` (k = 2) is in the limit's unit. */
  judged: z
    .object({
      verdict: z.enum(["pass", "fail", "undecided"]),
      expandedUncertainty: z.number().nullable(),
      guardBand: z.string(),
      reason: z.string(),
    })
    .nullable(),
  verdict: z.enum(lineVerdicts),
  because: z.string(),
  observation: observationSchema.nullable(),
  /** What the observation that counts has replaced, the latest first. */
  earlier: z.array(observationSchema),
});

const findingSchema = z.object({
  number: z.number().int(),
  severity: z.enum(["danger", "defect", "advice"]),
  checkKey: z.string().nullable(),
  elementId: z.string().nullable(),
  text: z.string(),
  revision: z.number().int(),
  raisedBy: z.string(),
  raisedAt: moment,
  answers: z.array(z.object({ revision: z.number().int(), text: z.string(), by: z.string(), at: moment })),
  closing: z.object({ text: z.string(), by: z.string(), at: moment }).nullable(),
});

const fileSchema = z.object({
  /** The workshop's own id of the file. */
  id: z.number().int(),
  kind: z.enum(["photo", "drawing"]),
  subject: z.enum(["unit", "check", "finding", "answer"]),
  checkKey: z.string().nullable(),
  finding: z.number().int().nullable(),
  revision: z.number().int(),
  caption: z.string(),
  contentType: z.string(),
  bytes: z.number().int(),
  width: z.number().int().nullable(),
  height: z.number().int().nullable(),
  sha256,
  addedBy: z.string(),
  addedAt: moment,
});

const conditionsSchema = z.object({
  place: z.string(),
  supply: z.string(),
  load: z.string(),
  supervision: z.string(),
  other: z.string(),
});

export const recordSchema = z.object({
  format: z.literal("mainsgate-record"),
  version: z.literal(1),
  publicCode: z.string(),
  /** Where anybody can see how the decision stands today. */
  publicAddress: z.url(),
  workshop: z.object({ name: z.string(), timeZone: z.string(), demo: z.boolean() }),
  unit: z.object({
    number: z.number().int(),
    name: z.string(),
    purpose: z.string(),
    placeOfUse: z.string(),
    builder: z.string(),
    revision: z.number().int(),
    revisions: z.array(z.object({ number: z.number().int(), submittedAt: moment.nullable() })),
  }),
  facts: unitFactsSchema,
  map: energyMapSchema,
  ruleSet: z.object({ key: z.string(), version: z.string(), title: z.string(), region: z.string() }),
  /** How an instrument's accuracy became an uncertainty, pinned like the rule set when the revision was submitted. */
  accuracyPolicy: z.enum(["rect", "maker-k2"]),
  statements: z.array(
    z.object({
      family: z.string(),
      level: z.enum(["danger", "defect", "caution", "good", "unknown"]),
      text: z.string(),
      elements: z.array(z.string()),
      conductors: z.array(z.string()),
    }),
  ),
  inspections: z.array(
    z.object({
      inspector: z.string(),
      revision: z.number().int(),
      takenAt: moment,
      endedAt: moment.nullable(),
    }),
  ),
  checks: z.array(checkSchema),
  findings: z.array(findingSchema),
  files: z.array(fileSchema),
  decision: z.object({
    kind: z.enum(["signed", "refused"]),
    at: moment,
    /** What the signer states by signing, or why they refuse. */
    statement: z.string(),
    /** Why it may be used although checks fail; null where none fails. */
    departures: z.string().nullable(),
    conditions: conditionsSchema.nullable(),
    recheckOn: day.nullable(),
    signer: z.object({
      /** What the account was called; the licence's own holder is the person who decided. */
      name: z.string(),
      licence: z.object({
        holder: z.string(),
        number: z.string(),
        authority: z.string(),
        validFrom: day,
        validTo: day,
        maxSupplyVolts: z.number(),
        coversBatteries: z.boolean(),
      }),
    }),
    signature: z.discriminatedUnion("method", [
      z.object({ method: z.literal("drawn"), imageSha256: sha256 }),
      z.object({ method: z.literal("typed"), typedName: z.string() }),
    ]),
  }),
  cautions: z.array(z.string()),
});

export type UnitRecord = z.infer<typeof recordSchema>;
export type RecordCheck = UnitRecord["checks"][number];
export type RecordObservation = z.infer<typeof observationSchema>;
export type RecordLimit = z.infer<typeof limitSchema>;
export type RecordCitation = z.infer<typeof citationSchema>;
export type RecordFile = z.infer<typeof fileSchema>;

/** What every record says about itself, on paper, on screen and in the data. */
export const recordCautions = [
  "Dangerous voltages may be present inside the unit, also with its switches off. Only a competent person may open it, after unplugging it, disconnecting its batteries and letting it discharge.",
  "This record states what was examined and measured on that day, on that revision of the unit. It is no promise about any other day.",
  "The codes in force at the place of use and the judgement of the licensed person prevail over anything computed here.",
  "Any change to the unit ends its validity: a new version of it must be examined and signed before it is plugged in.",
] as const;
