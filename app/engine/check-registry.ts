import type { CheckDefinition } from "./bench-check";

/** Every check, in the order in which a bench is worked: eyes first, dead tests before live ones, function last. */
export const checkRegistry: CheckDefinition[] = [];
