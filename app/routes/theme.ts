import { data, redirect } from "react-router";
import { readForm } from "~/middleware/read-form.server";
import type { Route } from "./+types/theme";
import { themeCookie, themeFrom } from "~/components/shell/theme";
import { safePath } from "~/middleware/safe-path";

/** Keeps the colour scheme in a cookie. A script gets an answer; a plain form is led back to where it came from. */
export async function action({ request }: Route.ActionArgs) {
  const form = await readForm(request);
  const headers = { "Set-Cookie": themeCookie(themeFrom(form.get("theme"))) };
  const byScript = new URL(request.url).pathname.endsWith(".data");
  return byScript ? data(null, { headers }) : redirect(safePath(form.get("to")), { headers });
}
