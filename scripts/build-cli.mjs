// Bundles src/cli into dist-cli/starstave.mjs; decoders come along as chunks that are loaded when needed,
// and the worker in which legs are planned as worker.mjs beside it.
//   node scripts/build-cli.mjs [DIR]   another folder than dist-cli
import { chmodSync, rmSync } from "node:fs";
import { join, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import { rolldown } from "rolldown";

const root = fileURLToPath(new URL("..", import.meta.url));
const target = resolve(process.argv[2] ?? join(root, "dist-cli"));
rmSync(target, { recursive: true, force: true });
const bundle = await rolldown({
	cwd: root,
	input: { starstave: join(root, "src/cli/main.ts"), worker: join(root, "src/workers/node-worker.ts") },
	platform: "node",
	logLevel: "warn",
});
await bundle.write({
	dir: target,
	format: "esm",
	entryFileNames: "[name].mjs",
	chunkFileNames: "chunks/[name]-[hash].mjs",
});
await bundle.close();
chmodSync(join(target, "starstave.mjs"), 0o755);
