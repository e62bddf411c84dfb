import { defineConfig } from "vitest/config";

export default defineConfig({
  test: {
    include: ["test/**/*.test.ts"],
    testTimeout: 60_000,
    hookTimeout: 60_000,
    // The default leaves one core idle, which on two is half of them.
    maxWorkers: "100%",
  },
});
