const BASE = "http://mainsgate.invalid";

/**
 * A path of this site out of what an address claims to be one, for `?to=`; the fallback for anything that a browser
 * would take elsewhere ("//host", "/\host", "/.//host", a full address, another scheme).
 */
export function safePath(value: unknown, fallback = "/"): string {
  if (typeof value !== "string" || !value.startsWith("/") || !URL.canParse(value, BASE)) return fallback;
  const url = new URL(value, BASE);
  // The parser has resolved dots, tabs and backslashes by now; what is left must still be a path of ours.
  if (url.origin !== BASE || url.pathname.startsWith("//")) return fallback;
  return url.pathname + url.search + url.hash;
}
