/** "A", "A and B", "A, B and C". */
export function list(words: string[]): string {
  if (words.length <= 1) return words.join("");
  return `${words.slice(0, -1).join(", ")} and ${words.at(-1) ?? ""}`;
}

/** First letter large, for a sentence. */
export const sentence = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
