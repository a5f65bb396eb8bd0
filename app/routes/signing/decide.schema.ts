import { z } from "zod";
import { lines, passwordAgain, perhapsLines, perhapsOneLine } from "~/engine/typed-text";

/** The tabs of the decision, as they stand in the address. */
export const decisionKinds = ["sign", "refuse", "send-back"] as const;
export type DecisionKind = (typeof decisionKinds)[number];
/** Of the address: which tab stands open. */
export const decisionKindSchema = z.enum(decisionKinds).catch("sign");
/** Of a sent form: what isn't known is never taken for a signature. */
export const sentDecisionSchema = z.enum(decisionKinds, "Say whether you sign, refuse or send back.");

const version = z.number("Load the page again.").int("Load the page again.").positive("Load the page again.");
const condition = perhapsLines(500).default("");

const PNG_PREFIX = "data:image/png;base64,";

function isBase64After(prefix: string) {
  return (text: string) => z.base64().min(1).safeParse(text.slice(prefix.length)).success;
}

const signatureFields = {
  signatureMethod: z.enum(["drawn", "typed"], "Draw or type the signature."),
  /** The canvas as a data URL; 300 kB of PNG are 400,000 characters. */
  signatureImage: z
    .string()
    .startsWith(PNG_PREFIX, "The drawing did not arrive as a picture. Draw it again.")
    .max(410_000, "The drawing is too large. Clear it and draw it again.")
    .refine(isBase64After(PNG_PREFIX), "The drawing did not arrive whole. Draw it again.")
    .optional(),
  typedName: perhapsOneLine(120).optional(),
  password: passwordAgain,
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
    statement: lines("Say in a sentence what your signature states.", 4000, 10),
    departures: perhapsLines(4000).optional(),
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
    statement: lines("Give the reasons: the builder must know what stands in the way.", 4000, 10),
    ...signatureFields,
  })
  .superRefine(signatureIsThere);

export const sendBackSchema = z.object({
  version,
  reason: lines("Say what stands in the way: the builder must know.", 4000, 10),
  severity: z.enum(["danger", "defect", "advice"], "Say how grave it is."),
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
