#!/usr/bin/env node
// Bundles tests/bench/music.ts (the core is TypeScript with .ts endings) and runs it: npm run bench:music -- DIR
import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "rolldown";

const here = fileURLToPath(new URL(".", import.meta.url));
const root = join(here, "..", "..");
// Inside node_modules so that what stays outside the bundle is found from there.
const folder = mkdtempSync(join(root, "node_modules", ".bench-music-"));
try {
	const file = join(folder, "music.mjs");
	await build({
		input: join(here, "music.ts"),
		platform: "node",
		external: ["music-tempo"],
		logLevel: "warn",
		output: { file, format: "esm", codeSplitting: false },
	});
	const args = ["--max-old-space-size=4096", file, ...process.argv.slice(2)];
	process.exitCode = spawnSync(process.execPath, args, { stdio: "inherit" }).status ?? 1;
} finally {
	rmSync(folder, { recursive: true, force: true });
}
