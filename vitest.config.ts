// Test configuration: without the framework's plugin, with the same aliases.
import path from "node:path";
import { defineConfig } from "vitest/config";

export default defineConfig({
  resolve: {
    alias: [
      { find: /^~\/db\//, replacement: path.resolve("db") + "/" },
      { find: /^~\/emails\//, replacement: path.resolve("emails") + "/" },
      { find: /^~\//, replacement: path.resolve("app") + "/" },
    ],
  },
  test: {
    include: ["tests/**/*.test.ts", "tests/**/*.test.tsx"],
    exclude: ["tests/reference/**", "tests/fixtures/**", "tests/browser/**", "tests/output/**", "node_modules/**"],
    globalSetup: "tests/support/global-setup.ts",
    setupFiles: "tests/support/environment.ts",
    testTimeout: 30_000,
    hookTimeout: 90_000,
    maxWorkers: 2,
  },
});
