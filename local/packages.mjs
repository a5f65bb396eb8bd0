// Runs before anything is installed: nothing but Node itself may be imported here.
import { spawn } from "node:child_process";
import { existsSync, readFileSync } from "node:fs";
import { delimiter, join } from "node:path";
import { SetupError } from "./steps.mjs";

/** Debian packages by what they are needed for. The -core packages bring MariaDB without a system service. */
export const debianPackages = {
  run: [
    { command: "mariadbd", package: "mariadb-server-core" },
    { command: "my_print_defaults", package: "mariadb-client-core" },
  ],
  test: [
    { command: "chromium", package: "chromium" },
    { command: "pdftotext", package: "poppler-utils" },
    { command: "qpdf", package: "qpdf" },
    { command: "zbarimg", package: "zbar-tools" },
  ],
};

/** Where Debian puts programs; an ordinary user's PATH often lacks the sbin folders. */
const PROGRAM_FOLDERS = ["/usr/local/sbin", "/usr/local/bin", "/usr/sbin", "/usr/bin", "/sbin", "/bin"];

/**
 * Full path of a program, or null when it is not installed.
 * @param {string} command
 * @param {{ path?: string }} [options] `path` replaces the PATH variable
 * @returns {string | null}
 */
export function findProgram(command, { path = process.env.PATH ?? "" } = {}) {
  for (const folder of [...path.split(delimiter).filter(Boolean), ...PROGRAM_FOLDERS]) {
    const candidate = join(folder, command);
    if (existsSync(candidate)) return candidate;
  }
  return null;
}

/** Stops with a sentence when Node is older than the product needs. */
export function requireNode() {
  const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
  if (major < 20 || (major === 20 && minor < 19)) {
    throw new SetupError(`Mainsgate needs Node.js 20.19 or newer; this is ${process.versions.node}.`);
  }
}

/**
 * Whether node_modules holds what the lock file asks for. npm writes its own copy of the lock last of all,
 * so an interrupted installation counts as missing.
 * @param {string} root
 */
export function npmPackagesAreCurrent(root) {
  const wanted = lockedPackages(join(root, "package-lock.json"));
  const installed = lockedPackages(join(root, "node_modules/.package-lock.json"));
  if (!wanted || !installed) return false;
  return Object.entries(wanted).every(
    ([path, entry]) => path === "" || entry.optional || installed[path]?.version === entry.version,
  );
}

/**
 * @param {string} file
 * @returns {Record<string, { version?: string, optional?: boolean }> | null}
 */
function lockedPackages(file) {
  if (!existsSync(file)) return null;
  return JSON.parse(readFileSync(file, "utf8")).packages ?? null;
}

/** @param {string} root */
export async function installNpmPackages(root) {
  // NODE_ENV=production would leave out the parts that build and start the product.
  await run("npm", ["ci", "--include=dev", "--no-fund", "--no-audit", "--loglevel=error"], {
    cwd: root,
    env: { ...process.env, NODE_ENV: "" },
  });
}

/**
 * The wanted Debian packages whose program is not there.
 * @param {{ command: string, package: string }[]} wanted
 */
export function missingDebianPackages(wanted) {
  return wanted.filter(({ command }) => !findProgram(command)).map((entry) => entry.package);
}

/**
 * Installs Debian packages as root; otherwise stops with the one line to run.
 * @param {string[]} names
 */
export async function installDebianPackages(names) {
  const command = `apt-get install --no-install-recommends ${names.join(" ")}`;
  if (!findProgram("apt-get")) {
    throw new SetupError(
      `These programs are missing, and this is no Debian to get them from: ${names.join(", ")}.`,
    );
  }
  if (process.getuid?.() !== 0) throw new SetupError(`Something is missing. Please run: sudo ${command}`);
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
  const install = ["install", "-y", "-q", "--no-install-recommends", ...names];
  try {
    await run("apt-get", ["update", "-q"], { env });
    await run("apt-get", install, { env });
  } catch (error) {
    throw new SetupError(
      `Debian's packages could not be installed. Please run: ${command}\n${String(error)}`,
    );
  }
}

/**
 * Runs a program to its end; what it printed is told only when it fails.
 * @param {string} command
 * @param {string[]} args
 * @param {import("node:child_process").SpawnOptions} options
 * @returns {Promise<void>}
 */
function run(command, args, options) {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { ...options, stdio: ["ignore", "pipe", "pipe"] });
    let output = "";
    child.stdout?.on("data", (chunk) => (output += chunk));
    child.stderr?.on("data", (chunk) => (output += chunk));
    child.on("error", reject);
    child.on("close", (code) =>
      code === 0
        ? resolve()
        : reject(new SetupError(`${command} ${args[0]} failed:\n${output.slice(-4000)}`)),
    );
  });
}
