// npm run starstave -- …: runs the built command line where the user stands, not where the project lies.
import { existsSync } from "node:fs";
import { fileURLToPath } from "node:url";

const built = fileURLToPath(new URL("../dist-cli/starstave.mjs", import.meta.url));
if (!existsSync(built)) {
	console.error("starstave: the command line is not built yet; run npm run build.");
	process.exit(1);
}
const stands = process.env.INIT_CWD;
if (stands !== undefined && existsSync(stands)) process.chdir(stands);
await import(new URL("../dist-cli/starstave.mjs", import.meta.url).href);
