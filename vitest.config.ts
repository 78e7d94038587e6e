import { defineConfig } from "vitest/config";

export default defineConfig({
  test: {
    include: ["tests/**/*.test.ts"],
    // The slowest tests simulate whole nights; they take seconds alone, longer beside others on two cores.
    reporters: ["default", "./.ci/closing-line.mjs"],
    testTimeout: 120_000,
    hookTimeout: 120_000,
    coverage: { include: ["pipeline/**", "stages/**"] },
  },
});
