import { fileURLToPath } from "node:url";
import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: { alias: { "@": fileURLToPath(new URL(".", import.meta.url)).replace(/\/$/, "") } },
  test: {
    include: ["tests/**/*.test.ts", "tests/**/*.test.tsx"],
    globalSetup: ["tests/support/global-setup.ts"],
    pool: "forks",
    maxWorkers: 2,
    testTimeout: 120_000,
    hookTimeout: 120_000,
    env: { TZ: "UTC" },
  },
});
