import { fileURLToPath } from "node:url";
import { defineConfig } from "vitest/config";

const root = fileURLToPath(new URL("..", import.meta.url)).replace(/\/$/, "");
const DATABASE_TESTS = ["tests/services/**/*.test.ts", "tests/worker/**/*.test.ts"];

const shared = {
  resolve: { alias: { "@/": `${root}/src/`, "@seed/": `${root}/seed/`, "@tests/": `${root}/tests/` } },
};

export default defineConfig({
  root,
  test: {
    // Two cores: more workers only wait for each other.
    maxWorkers: 2,
    projects: [
      {
        ...shared,
        test: {
          name: "unit",
          include: ["tests/**/*.test.{ts,tsx}"],
          exclude: [...DATABASE_TESTS, "tests/e2e/**"],
          setupFiles: ["tests/support/setup.ts"],
          testTimeout: 30_000,
        },
      },
      {
        ...shared,
        test: {
          name: "db",
          include: DATABASE_TESTS,
          setupFiles: ["tests/support/setup.ts"],
          globalSetup: ["tests/support/database-server.ts"],
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
    ],
  },
});
