// `npm start`, `npm run dev` and `npm run services`. Plain Node until the packages are there; then TypeScript takes over.
import { dirname } from "node:path";
import { fileURLToPath } from "node:url";
import {
  debianPackages,
  installDebianPackages,
  installNpmPackages,
  missingDebianPackages,
  npmPackagesAreCurrent,
  requireNode,
} from "./packages.mjs";
import { reportFailure, step } from "./steps.mjs";

const root = dirname(dirname(fileURLToPath(import.meta.url)));
process.chdir(root);
// The S3 client would say at every start that its next versions want a newer Node.
process.env.AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED ??= "true";

try {
  requireNode();
  const [, , option] = process.argv;
  const mode = option === "--dev" ? "dev" : option === "--services" ? "services" : "serve";
  console.log(
    { dev: "Mainsgate, with hot reload", services: "Mainsgate's services", serve: "Mainsgate" }[mode],
  );
  if (!npmPackagesAreCurrent(root)) await step("Install npm packages", () => installNpmPackages(root));
  const missing = missingDebianPackages(debianPackages.run);
  if (missing.length > 0) {
    await step(
      "Install MariaDB from Debian",
      () => installDebianPackages(missing),
      () => missing.join(", "),
    );
  }
  const { register } = await import("tsx/esm/api");
  register();
  const { runMainsgate } = await import("./run");
  await runMainsgate({ root, mode });
} catch (error) {
  reportFailure(error);
}
