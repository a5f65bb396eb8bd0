import { join } from "node:path";
import { startChild } from "./processes";

/** Puts the demo workshop into the database that `env` names. */
export async function seed(root: string, env: NodeJS.ProcessEnv): Promise<void> {
  const { process: child } = await startChild({
    name: "The seed",
    script: join(root, "local/seed/run.ts"),
    cwd: root,
    env,
  });
  await child.exited;
}
