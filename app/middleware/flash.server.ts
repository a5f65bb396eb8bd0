import { createCookie, redirect } from "react-router";
import { z } from "zod";
import { environment } from "~/environment.server";

const flashSchema = z.object({ tone: z.enum(["done", "note", "problem"]), text: z.string().max(500) });

/** What just happened, told at the top of the next page. */
export type FlashMessage = z.infer<typeof flashSchema>;

function flashCookie() {
  const { APP_URL, SESSION_SECRET } = environment();
  return createCookie("flash", {
    httpOnly: true,
    sameSite: "lax",
    path: "/",
    secure: APP_URL.startsWith("https:"),
    maxAge: 60,
    secrets: [SESSION_SECRET],
  });
}

/** A redirect whose page says what was done. For actions that succeeded; refusals are told beside the form. */
export async function redirectWithFlash(
  to: string,
  text: string,
  tone: FlashMessage["tone"] = "done",
): Promise<Response> {
  const cookie = await flashCookie().serialize({ tone, text } satisfies FlashMessage);
  return redirect(to, { headers: { "Set-Cookie": cookie } });
}

/** The message that came with this request, and the header that lets it be told only once. */
export async function takeFlash(
  request: Request,
): Promise<{ flash: FlashMessage | null; headers: HeadersInit }> {
  const value: unknown = await flashCookie().parse(request.headers.get("Cookie"));
  const parsed = flashSchema.safeParse(value);
  if (!parsed.success) return { flash: null, headers: {} };
  return { flash: parsed.data, headers: { "Set-Cookie": await flashCookie().serialize("", { maxAge: 0 }) } };
}
