import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { pathToFileURL } from "node:url";
import { rolldown } from "rolldown";

/** The Node worker as plain JavaScript in a folder of its own, as the build would bundle it. */
export interface BundledWorker {
	readonly entry: URL;
	remove(): void;
}

export async function bundleWorker(): Promise<BundledWorker> {
	const root = resolve(import.meta.dirname, "../..");
	const folder = mkdtempSync(join(tmpdir(), "starstave-worker-"));
	const bundle = await rolldown({
		cwd: root,
		input: join(root, "src/workers/node-worker.ts"),
		platform: "node",
		logLevel: "silent",
	});
	await bundle.write({ dir: folder, format: "esm", entryFileNames: "[name].mjs", chunkFileNames: "[name]-[hash].mjs" });
	await bundle.close();
	return {
		entry: pathToFileURL(join(folder, "node-worker.mjs")),
		remove: () => rmSync(folder, { recursive: true, force: true }),
	};
}
