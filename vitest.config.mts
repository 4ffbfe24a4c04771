import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { tsconfigPaths: true, conditions: ["react-server", "node", "import", "default"] },
  test: {
    projects: [
      { extends: true, test: { name: "unit", include: ["tests/unit/**/*.test.ts"], environment: "node" } },
      {
        extends: true,
        test: {
          name: "component",
          include: ["tests/unit/**/*.test.tsx"],
          environment: "happy-dom",
        },
      },
      { extends: true, test: { name: "integration", include: ["tests/integration/**/*.test.ts"], environment: "node" } },
    ],
  },
});
