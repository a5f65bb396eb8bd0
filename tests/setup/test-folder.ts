import { mkdirSync, mkdtempSync, realpathSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";

/** The checkout. Vitest runs from it. */
export const root = process.cwd();

/**
 * A throw-away folder for one part of the tests. `npm test` names one folder for all, and sweeps it at the end
 * whatever happens; on its own, a part takes a folder below the system's temporary one.
 */
export function makeTestFolder(part: string): { folder: string; remove(): void } {
  const common = process.env.MAINSGATE_TEST_ROOT;
  if (common !== undefined) mkdirSync(common, { recursive: true });
  const folder = mkdtempSync(join(realpathSync(common ?? tmpdir()), `mg-${part}-`));
  return { folder, remove: () => rmSync(folder, { recursive: true, force: true }) };
}
