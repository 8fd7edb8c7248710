#!/usr/bin/env node
// Bundles tests/bench/NAME.ts (the core is TypeScript with .ts endings) and runs it: node tests/bench/run.mjs NAME …
import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "rolldown";

const [name, ...rest] = process.argv.slice(2);
const here = fileURLToPath(new URL(".", import.meta.url));
const root = join(here, "..", "..");
// Inside node_modules so that what stays outside the bundle is found from there.
const folder = mkdtempSync(join(root, "node_modules", `.bench-${name}-`));
try {
	const file = join(folder, `${name}.mjs`);
	await build({
		input: join(here, `${name}.ts`),
		platform: "node",
		logLevel: "warn",
		// A tracker that is measured beside ours: as its package ships it.
		external: ["music-tempo"],
		output: { file, format: "esm", codeSplitting: false },
	});
	const args = ["--max-old-space-size=4096", file, ...rest];
	process.exitCode = spawnSync(process.execPath, args, { stdio: "inherit" }).status ?? 1;
} finally {
	rmSync(folder, { recursive: true, force: true });
}
