// Bundles src/cli into dist-cli/starstave.mjs; decoders and workers come along as chunks that are loaded when needed.
import { chmodSync, rmSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { rolldown } from "rolldown";

const root = fileURLToPath(new URL("..", import.meta.url));
rmSync(`${root}dist-cli`, { recursive: true, force: true });
const bundle = await rolldown({
	cwd: root,
	input: { starstave: `${root}src/cli/main.ts` },
	platform: "node",
	// Some decoders ask for CommonJS' names before they find out where they run.
	transform: { target: "node20" },
	logLevel: "warn",
});
await bundle.write({
	dir: `${root}dist-cli`,
	format: "esm",
	entryFileNames: "[name].mjs",
	chunkFileNames: "chunks/[name]-[hash].mjs",
	minify: false,
});
await bundle.close();
chmodSync(`${root}dist-cli/starstave.mjs`, 0o755);
