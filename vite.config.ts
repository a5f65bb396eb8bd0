import { reactRouter } from "@react-router/dev/vite";
import tailwindcss from "@tailwindcss/vite";
import { defineConfig } from "vite";

export default defineConfig({
  resolve: { tsconfigPaths: true },
  plugins: [tailwindcss(), reactRouter()],
  environments: {
    // The HTTP server is bundled with the routes, so that both share one module graph (one pool, one context).
    ssr: { build: { rollupOptions: { input: "./app/server.ts" } } },
  },
});
