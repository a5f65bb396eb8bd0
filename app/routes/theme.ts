import { data, redirect } from "react-router";
import type { Route } from "./+types/theme";
import { safeReturn, themeCookie, themeFrom } from "~/components/shell/theme";

/** Keeps the colour scheme in a cookie. A script gets an answer; a plain form is led back to where it came from. */
export async function action({ request }: Route.ActionArgs) {
  const form = await request.formData();
  const headers = { "Set-Cookie": themeCookie(themeFrom(form.get("theme"))) };
  const byScript = new URL(request.url).pathname.endsWith(".data");
  return byScript ? data(null, { headers }) : redirect(safeReturn(form.get("to")), { headers });
}
