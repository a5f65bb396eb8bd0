/** The colour scheme a person asked for: kept in a cookie, so that the server already sends the right page. */
export const themes = ["system", "light", "dark"] as const;

export type Theme = (typeof themes)[number];

export const themeTitles: Record<Theme, string> = {
  system: "As the device",
  light: "Light",
  dark: "Dark bench",
};

const COOKIE = "theme";

/** One of the three themes, or "system" for anything else. */
export function themeFrom(value: unknown): Theme {
  return themes.find((theme) => theme === value) ?? "system";
}

/** The theme in a request's Cookie header. */
export function readTheme(cookieHeader: string | null): Theme {
  for (const pair of (cookieHeader ?? "").split(";")) {
    const [name, value] = pair.trim().split("=");
    if (name === COOKIE) return themeFrom(value);
  }
  return "system";
}

/** The Set-Cookie header that keeps a theme for a year. It holds no secret and scripts may read it. */
export function themeCookie(theme: Theme): string {
  return `${COOKIE}=${theme}; Path=/; Max-Age=31536000; SameSite=Lax`;
}
