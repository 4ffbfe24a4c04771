import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { tsconfigPaths: true },
  test: {
    include: ["tests/soak/**/*.test.ts"],
    environment: "node",
    hookTimeout: 60_000,
    provide: { outsideS3: JSON.parse(process.env.SOAK_S3 ?? "null") },
  },
});
