#!/usr/bin/env node
// Bundles tests/bench/flight.ts (the core is TypeScript with .ts endings) and runs it: npm run bench:flight
import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "rolldown";

const here = fileURLToPath(new URL(".", import.meta.url));
const root = join(here, "..", "..");
// Inside node_modules so that what stays outside the bundle is found from there.
const folder = mkdtempSync(join(root, "node_modules", ".bench-flight-"));
try {
	const file = join(folder, "flight.mjs");
	await build({
		input: join(here, "flight.ts"),
		platform: "node",
		logLevel: "warn",
		output: { file, format: "esm", codeSplitting: false },
	});
	process.exitCode = spawnSync(process.execPath, [file, ...process.argv.slice(2)], { stdio: "inherit" }).status ?? 1;
} finally {
	rmSync(folder, { recursive: true, force: true });
}
