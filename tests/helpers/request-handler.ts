import type { RouteConfigEntry } from "@react-router/dev/routes";
import { createRequestHandler, RouterContextProvider, type ServerBuild } from "react-router";
import { clientAddressContext, cspNonceContext, requestIdContext } from "~/context";
import { signIn } from "~/middleware/session.server";
import reactRouterConfig from "../../react-router.config";
import routeConfig from "~/routes";

type RouteModule = NonNullable<ServerBuild["routes"][string]>["module"];

const modules = import.meta.glob<RouteModule>([
  "../../app/root.tsx",
  "../../app/routes/**/*.{ts,tsx}",
  "!../../app/routes/**/*.test.{ts,tsx}",
]);

/** A route of app/routes.ts with its whole address and its module. */
export interface RealRoute {
  id: string;
  /** From the root, such as "/w/:workshop/units/:unit". */
  address: string;
  isIndex: boolean;
  module: RouteModule;
}

export interface RealHandler {
  routes: RealRoute[];
  /** Answers a request as the server does, but for the rendering: a page's answer has status and headers only. */
  handle(request: Request): Promise<Response>;
  /** The Cookie header of a new session of a person. */
  cookieOf(personId: number): Promise<string>;
}

/** React Router's request handler over the route table, the route modules and the middleware that the server runs. */
export async function realHandler(): Promise<RealHandler> {
  const found: (RealRoute & { parentId: string; path: string | undefined })[] = [];
  await collect(routeConfig, "root", "", found);
  const manifest: ServerBuild["routes"] = {
    root: { id: "root", path: "", module: await moduleOf("root.tsx") },
  };
  for (const { id, parentId, path, isIndex, module } of found) {
    manifest[id] = { id, parentId, path, index: isIndex || undefined, module };
  }
  const handler = createRequestHandler(buildOf(manifest), "production");
  return {
    routes: found,
    handle: (request) => handler(request, newContext()),
    async cookieOf(personId) {
      const setCookie = await signIn(new Request("http://mainsgate.test/"), newContext(), personId);
      return setCookie.split(";")[0] ?? "";
    },
  };
}

async function collect(
  entries: RouteConfigEntry[],
  parentId: string,
  parentAddress: string,
  found: (RealRoute & { parentId: string; path: string | undefined })[],
): Promise<void> {
  for (const { file, path, index, children } of entries) {
    const id = file.replace(/\.tsx?$/, "");
    const address = path === undefined ? parentAddress : `${parentAddress}/${path}`;
    found.push({
      id,
      parentId,
      path,
      isIndex: index ?? false,
      address: address === "" ? "/" : address,
      module: await moduleOf(file),
    });
    await collect(children ?? [], id, address, found);
  }
}

async function moduleOf(file: string): Promise<RouteModule> {
  const load = modules[`../../app/${file}`];
  if (!load) throw new Error(`app/routes.ts names ${file}, which doesn't exist.`);
  return load();
}

function newContext(): RouterContextProvider {
  const context = new RouterContextProvider();
  context.set(requestIdContext, "test");
  context.set(cspNonceContext, "test");
  context.set(clientAddressContext, "192.0.2.1");
  return context;
}

function buildOf(routes: ServerBuild["routes"]): ServerBuild {
  return {
    entry: {
      module: {
        default: (_request, status, headers) => new Response(null, { status, headers }),
        handleError() {
          // The status tells; a refusal on purpose needs no line in the test's output.
        },
        streamTimeout: 5_000,
      },
    },
    routes,
    assets: { entry: { imports: [], module: "" }, routes: {}, url: "", version: "test" },
    publicPath: "/",
    assetsBuildDirectory: "build/client",
    future: reactRouterConfig.future,
    ssr: true,
    isSpaMode: false,
    prerender: [],
    routeDiscovery: { mode: "initial", manifestPath: "/__manifest" },
  };
}
