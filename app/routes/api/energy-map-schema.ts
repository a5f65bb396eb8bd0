import { energyMapJsonSchema } from "~/engine/json-schema";

/** The published JSON Schema of the energy map; public, since a map may be made anywhere. */
export function loader() {
  return new Response(JSON.stringify(energyMapJsonSchema(), null, 2), {
    headers: { "Content-Type": "application/schema+json", "Cache-Control": "public, max-age=3600" },
  });
}
