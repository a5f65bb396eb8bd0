/**
 * Runs one step of the set-up, telling what it does and how long it took.
 * `work` may return a short note that is printed behind the time.
 * @template T
 * @param {string} what in the imperative, e.g. "Start MariaDB"
 * @param {() => T | Promise<T>} work
 * @param {(result: T) => string} [note]
 * @returns {Promise<T>}
 */
export async function step(what, work, note) {
  const started = performance.now();
  try {
    const result = await work();
    const remark = note ? note(result) : "";
    console.log(`  ${what.padEnd(34)} ${seconds(started)}${remark ? `  ${remark}` : ""}`);
    return result;
  } catch (error) {
    console.log(`  ${what.padEnd(34)} ${seconds(started)}  failed`);
    throw error;
  }
}

/** @param {number} started */
function seconds(started) {
  return `${((performance.now() - started) / 1000).toFixed(1).padStart(6)} s`;
}

/** A reason to stop that the person at the keyboard can act on: printed as a sentence, without a stack. */
export class SetupError extends Error {}

/**
 * Prints why the set-up stopped and sets the exit status.
 * @param {unknown} error
 */
export function reportFailure(error) {
  if (error instanceof SetupError) console.error(`\n${error.message}`);
  else console.error("\nThe set-up stopped:", error);
  process.exitCode = 1;
}
