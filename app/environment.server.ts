import { type Environment, readEnvironment } from "./environment.table";

let checked: Environment | undefined;

/**
 * The checked environment, read once. The server's entry calls it before anything else.
 * @throws EnvironmentError when a variable is missing or wrong
 */
export function environment(): Environment {
  checked ??= readEnvironment(process.env);
  return checked;
}
