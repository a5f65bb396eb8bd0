/**
 * Three buttons for the colour scheme. With JavaScript the page changes at once; without it the form is posted to
 * /theme and the same page comes back.
 *   <ThemeSwitch />
 */
import { Monitor, Moon, Sun } from "lucide-react";
import { useFetcher, useLocation, useRouteLoaderData } from "react-router";
import type { IconType } from "../ui/icon-type";
import { themeFrom, themes, themeTitles, type Theme } from "./theme";

const icons: Record<Theme, IconType> = { system: Monitor, light: Sun, dark: Moon };

/** The theme being asked for right now, else the one that the root loader read from the cookie. */
function useTheme(): Theme {
  const root = useRouteLoaderData<{ theme: Theme }>("root");
  const fetcher = useFetcher({ key: "theme" });
  const asked = fetcher.formData?.get("theme");
  return asked ? themeFrom(asked) : (root?.theme ?? "system");
}

export function ThemeSwitch() {
  const fetcher = useFetcher({ key: "theme" });
  const location = useLocation();
  const current = useTheme();
  return (
    <fetcher.Form method="post" action="/theme" aria-label="Colours">
      <input type="hidden" name="to" value={location.pathname + location.search} />
      <p className="legend-text px-3 pt-2">Colours</p>
      <div className="grid grid-cols-3 gap-1 p-2">
        {themes.map((theme) => {
          const Icon = icons[theme];
          return (
            <button
              key={theme}
              type="submit"
              name="theme"
              value={theme}
              aria-pressed={theme === current}
              // At once; the answer of the server then sets the same.
              onClick={() => document.documentElement.setAttribute("data-theme", theme)}
              className="flex min-h-14 flex-col items-center justify-center gap-1 rounded-sm border border-rule px-1 text-xs font-medium hover:bg-inset aria-pressed:border-copper aria-pressed:bg-copper-wash"
            >
              <Icon aria-hidden size={18} />
              {themeTitles[theme]}
            </button>
          );
        })}
      </div>
    </fetcher.Form>
  );
}
