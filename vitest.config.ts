import { defineConfig } from "vitest/config";

export default defineConfig({
	test: {
		projects: [
			{
				test: {
					name: "core",
					include: ["tests/**/*.test.ts", "tests/**/*.test.tsx"],
					exclude: ["tests/e2e/**", "tests/bench/**"],
					environment: "node",
					testTimeout: 120_000,
					hookTimeout: 120_000,
				},
			},
			{
				test: {
					name: "e2e",
					include: ["tests/e2e/**/*.test.ts"],
					environment: "node",
					testTimeout: 180_000,
					hookTimeout: 120_000,
					fileParallelism: false,
				},
			},
		],
	},
});
