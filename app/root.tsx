import latin400 from "@fontsource/public-sans/files/public-sans-latin-400-normal.woff2?url";
import latin600 from "@fontsource/public-sans/files/public-sans-latin-600-normal.woff2?url";
import type { ReactNode } from "react";
import {
  Links,
  Meta,
  Outlet,
  Scripts,
  ScrollRestoration,
  useRouteError,
  useRouteLoaderData,
} from "react-router";
import type { Route } from "./+types/root";
import stylesheet from "./app.css?url";
import { ErrorPage } from "~/components/shell/error-page";
import { PlainShell } from "~/components/shell/plain-shell";
import { speakPlainly } from "~/components/schema-words";
import { readTheme } from "~/components/shell/theme";
import { sessionMiddleware } from "~/middleware/session.server";

speakPlainly();

export const middleware: Route.MiddlewareFunction[] = [sessionMiddleware];

export const links: Route.LinksFunction = () => [
  { rel: "preload", href: latin400, as: "font", type: "font/woff2", crossOrigin: "anonymous" },
  { rel: "preload", href: latin600, as: "font", type: "font/woff2", crossOrigin: "anonymous" },
  { rel: "stylesheet", href: stylesheet },
  { rel: "icon", href: "/favicon.svg", type: "image/svg+xml" },
  { rel: "icon", href: "/favicon.ico", sizes: "32x32" },
  { rel: "apple-touch-icon", href: "/apple-touch-icon.png" },
  { rel: "manifest", href: "/site.webmanifest" },
];

export const meta: Route.MetaFunction = () => [{ title: "Mainsgate" }];

export function loader({ request }: Route.LoaderArgs) {
  return { theme: readTheme(request.headers.get("Cookie")) };
}

/** The document. The nonce of the content security policy reaches its scripts by way of ServerRouter. */
export function Layout({ children }: { children: ReactNode }) {
  // Without data (the root loader itself failed) the device decides.
  const theme = useRouteLoaderData<typeof loader>("root")?.theme ?? "system";
  return (
    <html lang="en" data-theme={theme}>
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1, viewport-fit=cover" />
        <meta name="color-scheme" content="light dark" />
        <Meta />
        <Links />
      </head>
      <body>
        {children}
        <ScrollRestoration />
        <Scripts />
      </body>
    </html>
  );
}

export default function Root() {
  return <Outlet />;
}

export function ErrorBoundary() {
  return (
    <PlainShell>
      <ErrorPage error={useRouteError()} />
    </PlainShell>
  );
}
