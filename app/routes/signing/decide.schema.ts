import { z } from "zod";

/** The tabs of the decision, as they stand in the address. */
export const decisionKinds = ["sign", "refuse", "send-back"] as const;
export type DecisionKind = (typeof decisionKinds)[number];
export const decisionKindSchema = z.enum(decisionKinds).catch("sign");

const version = z.number().int().positive();
const text = (limit: number) => z.string().trim().max(limit, `At most ${limit} characters.`);
const condition = text(500).default("");

const PNG_PREFIX = "data:image/png;base64,";

const signatureFields = {
  signatureMethod: z.enum(["drawn", "typed"], "Draw or type the signature."),
  /** The canvas as a data URL; 300 kB of PNG are 400,000 characters. */
  signatureImage: z
    .string()
    .startsWith(PNG_PREFIX, "The drawing did not arrive as a picture. Draw it again.")
    .max(410_000, "The drawing is too large. Clear it and draw it again.")
    .optional(),
  typedName: text(120).optional(),
  password: z.string("Type your password: it is asked for in the act.").min(1).max(200),
};

interface SignatureFields {
  signatureMethod: "drawn" | "typed";
  signatureImage?: string | undefined;
  typedName?: string | undefined;
}

/** The one of the two that was chosen must be there. */
function signatureIsThere(value: SignatureFields, context: z.RefinementCtx) {
  if (value.signatureMethod === "drawn" && !value.signatureImage) {
    context.addIssue({
      code: "custom",
      path: ["signatureImage"],
      message: "Draw your signature, or choose to type your name.",
    });
  }
  if (value.signatureMethod === "typed" && !value.typedName) {
    context.addIssue({ code: "custom", path: ["typedName"], message: "Type your name." });
  }
}

export const signSchema = z
  .object({
    version,
    statement: text(4000).min(10, "Say in a sentence what your signature states."),
    departures: text(4000).optional(),
    place: condition,
    supply: condition,
    load: condition,
    supervision: condition,
    other: condition,
    recheckOn: z.iso.date("Choose the day by which it must be checked again."),
    ...signatureFields,
  })
  .superRefine(signatureIsThere);

export const refuseSchema = z
  .object({
    version,
    statement: text(4000).min(10, "Give the reasons: the builder must know what stands in the way."),
    ...signatureFields,
  })
  .superRefine(signatureIsThere);

export const sendBackSchema = z.object({
  version,
  reason: text(4000).min(10, "Say what stands in the way: the builder must know."),
  severity: z.enum(["danger", "defect", "advice"]),
});

/** What the service is given of a signature that has passed the schema. */
export function signatureOf(value: SignatureFields) {
  return value.signatureMethod === "drawn"
    ? {
        method: "drawn" as const,
        png: Uint8Array.from(atob((value.signatureImage ?? "").slice(PNG_PREFIX.length)), (character) =>
          character.charCodeAt(0),
        ),
      }
    : { method: "typed" as const, typedName: value.typedName ?? "" };
}
