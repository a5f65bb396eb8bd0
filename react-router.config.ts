import type { Config } from "@react-router/dev/config";

export default {
  appDirectory: "app",
  // The tests build beside a running server, into a folder of their own.
  buildDirectory: process.env.BUILD_FOLDER || "build",
  ssr: true,
  // All routes are known from the start: finding them one by one asks the server at each new address, and a form that
  // is sent just as the connection is lost would lose its page over that question.
  routeDiscovery: { mode: "initial" },
  future: {
    v8_middleware: true,
    v8_splitRouteModules: true,
    v8_viteEnvironmentApi: true,
    v8_trailingSlashAwareDataRequests: true,
    v8_passThroughRequests: true,
  },
} satisfies Config;
