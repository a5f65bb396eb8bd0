import { fileURLToPath } from "node:url";
import { reactRouter } from "@react-router/dev/vite";
import tailwindcss from "@tailwindcss/vite";
import { defineConfig } from "vite";

/**
 * react-router's export map names only its development build, whatever NODE_ENV says. A build takes the production
 * one by path, and bundles it on the server too, so that every importer shares it.
 */
const productionRouter = (file: string) =>
  fileURLToPath(new URL(`./node_modules/react-router/dist/production/${file}`, import.meta.url));

export default defineConfig(({ command }) => ({
  resolve: {
    tsconfigPaths: true,
    alias:
      command === "build"
        ? [
            { find: /^react-router$/, replacement: productionRouter("index.mjs") },
            { find: /^react-router\/dom$/, replacement: productionRouter("dom-export.mjs") },
          ]
        : [],
  },
  plugins: [tailwindcss(), reactRouter()],
  environments: {
    // The HTTP server is bundled with the routes, so that both share one module graph (one pool, one context).
    ssr: {
      build: { rollupOptions: { input: "./app/server.ts" } },
      resolve: command === "build" ? { noExternal: ["react-router", /^@react-router\//] } : {},
    },
  },
}));
