import { fileURLToPath } from "node:url";
import { defineConfig } from "vitest/config";

const SHARED = { environment: "node", env: { TZ: "UTC", NODE_ENV: "test" } } as const;

export default defineConfig({
  resolve: {
    tsconfigPaths: true,
    // The package only refuses to be bundled for browsers; tests run server code directly.
    alias: { "server-only": fileURLToPath(new URL("./tests/support/server-only.ts", import.meta.url)) },
  },
  test: {
    projects: [
      { extends: true, test: { ...SHARED, name: "unit", include: ["tests/unit/**/*.test.ts"] } },
      {
        extends: true,
        test: {
          ...SHARED,
          name: "component",
          include: ["tests/unit/**/*.test.tsx"],
          environment: "happy-dom",
        },
      },
      {
        extends: true,
        test: {
          ...SHARED,
          name: "integration",
          include: ["tests/integration/**/*.test.ts"],
          globalSetup: "tests/support/database-cluster.ts",
          testTimeout: 20_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          ...SHARED,
          name: "architecture",
          include: ["tests/architecture/**/*.test.ts"],
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
    ],
  },
});
