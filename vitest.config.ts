import path from "node:path";
import { defineConfig } from "vitest/config";

const alias = { "@": path.resolve(import.meta.dirname), "server-only": path.resolve(import.meta.dirname, "tests/support/serverOnly.ts") };

/**
 * Three suites: `unit` is pure, `integration` has PostgreSQL and sockets, `browser` drives Chromium against a running product.
 * They differ in how many files run at once, so in one call they run one after the other.
 */
export default defineConfig({
  resolve: { alias },
  test: {
    projects: [
      {
        resolve: { alias },
        test: {
          name: "unit",
          sequence: { groupOrder: 0 },
          include: [
            "tests/cells/**/*.test.ts",
            "tests/app/**/*.test.{ts,tsx}",
            "tests/examples.test.ts",
            "tests/compat/**/*.test.ts",
            "tests/reference/**/*.test.ts",
            "tests/house.test.ts",
          ],
          exclude: ["tests/app/server/**"],
          testTimeout: 60_000,
        },
      },
      {
        resolve: { alias },
        test: {
          name: "integration",
          sequence: { groupOrder: 1 },
          include: ["tests/db/**/*.test.ts", "tests/realtime/**/*.test.ts", "tests/app/server/**/*.test.ts"],
          testTimeout: 90_000,
          hookTimeout: 90_000,
          fileParallelism: true,
          maxWorkers: 2,
        },
      },
      {
        resolve: { alias },
        test: {
          name: "browser",
          sequence: { groupOrder: 2 },
          include: ["tests/flow/**/*.test.ts"],
          testTimeout: 300_000,
          hookTimeout: 180_000,
          fileParallelism: false,
          globalSetup: ["tests/support/product.ts"],
        },
      },
    ],
  },
});
