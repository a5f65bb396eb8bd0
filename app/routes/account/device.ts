const browsers: [RegExp, string][] = [
  [/Edg(?:e|A|iOS)?\//, "Edge"],
  [/OPR\/|Opera/, "Opera"],
  [/SamsungBrowser\//, "Samsung Internet"],
  [/Firefox\/|FxiOS\//, "Firefox"],
  [/HeadlessChrome\/|Chrome\/|CriOS\/|Chromium\//, "Chrome or Chromium"],
  [/Safari\//, "Safari"],
];

const systems: [RegExp, string][] = [
  [/iPad/, "iPad"],
  [/iPhone/, "iPhone"],
  [/Android/, "Android"],
  [/Windows/, "Windows"],
  [/Mac OS X|Macintosh/, "macOS"],
  [/CrOS/, "ChromeOS"],
  [/Linux|X11/, "Linux"],
];

/** A browser's own description in words that a person recognises; a hint, since any program can claim anything. */
export function deviceOf(userAgent: string): string {
  const name = (list: [RegExp, string][]) => list.find(([pattern]) => pattern.test(userAgent))?.[1];
  const browser = name(browsers);
  const system = name(systems);
  if (browser && system) return `${browser} on ${system}`;
  return browser ?? system ?? "Unknown device";
}
