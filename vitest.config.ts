import { defineConfig } from "vitest/config";

// The React Router plugin stays out: under vitest it would rewrite route modules for the browser build.
export default defineConfig({
  resolve: { tsconfigPaths: true },
  test: {
    projects: [
      {
        extends: true,
        test: { name: "unit", include: ["app/**/*.test.ts", "app/**/*.test.tsx", "local/**/*.test.ts"] },
      },
      {
        extends: true,
        test: {
          name: "integration",
          include: ["tests/integration/**/*.test.ts"],
          globalSetup: ["tests/setup/integration.ts"],
          setupFiles: ["tests/setup/integration-file.ts"],
          pool: "forks",
          fileParallelism: false,
          testTimeout: 30_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: "e2e",
          include: ["tests/e2e/**/*.test.ts"],
          globalSetup: ["tests/setup/e2e.ts"],
          pool: "forks",
          fileParallelism: false,
          testTimeout: 180_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
