// `npm test`: everything, or the parts named, e.g. `npm test -- unit integration`.
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
  console.log("Mainsgate's tests");
  if (!npmPackagesAreCurrent(root)) await step("Install npm packages", () => installNpmPackages(root));
  const missing = missingDebianPackages([...debianPackages.run, ...debianPackages.test]);
  if (missing.length > 0) {
    const install = () => installDebianPackages(missing);
    await step("Install Debian packages", install, () => missing.join(", "));
  }
  const { register } = await import("tsx/esm/api");
  register();
  const { runTests } = await import("./run-tests");
  await runTests({ root, parts: process.argv.slice(2) });
} catch (error) {
  reportFailure(error);
}
