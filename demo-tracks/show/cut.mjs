// Cuts the demo show: node demo-tracks/show/cut.mjs. Bundles lamps-show.ts with the core, since Node reads no TypeScript.
import { spawnSync } from "node:child_process";
import { mkdirSync, rmSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { rolldown } from "rolldown";

const here = fileURLToPath(new URL(".", import.meta.url));
// Below the clone, so that what stays outside the bundle is found in node_modules.
const out = join(here, "../../.setup/demo-show");
mkdirSync(out, { recursive: true });
const bundle = await rolldown({
	input: join(here, "lamps-show.ts"),
	platform: "node",
	external: /^@audio\//,
	logLevel: "warn",
});
await bundle.write({ dir: out, format: "esm", entryFileNames: "lamps-show.mjs" });
const run = spawnSync(process.execPath, [join(out, "lamps-show.mjs"), join(here, ".."), ...process.argv.slice(2)], {
	stdio: "inherit",
});
rmSync(out, { recursive: true, force: true });
process.exit(run.status ?? 1);
