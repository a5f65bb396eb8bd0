import { z } from "zod";

import { energyMapSchema } from "./energy-map";

/** The published JSON Schema (draft 2020-12) of the energy map, made from the schema that the application itself uses. */
export function energyMapJsonSchema(): Record<string, unknown> {
  return {
    ...z.toJSONSchema(energyMapSchema, { target: "draft-2020-12" }),
    title: "Mainsgate energy map, version 1",
    description:
      'Where energy enters a unit, what it passes and where it ends. null and "unknown" say: not known.',
  };
}
