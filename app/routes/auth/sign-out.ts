import { redirect } from "react-router";
import { signOut } from "~/middleware/session.server";
import type { Route } from "./+types/sign-out";

/** Signing out changes something, so a mere visit doesn't do it. */
export function loader() {
  return redirect("/");
}

export async function action({ request, context }: Route.ActionArgs) {
  return redirect("/sign-in?done=signed-out", { headers: { "Set-Cookie": await signOut(request, context) } });
}
