// Sets up what is missing, then builds. Run by npm before `start`, `test` and `starstave`; needs Node and npm alone.
//   node scripts/setup.mjs app|test|cli
import { ensureBuild } from "./setup/build.mjs";
import { ensureChromium } from "./setup/chromium.mjs";
import { ensureDependencies } from "./setup/dependencies.mjs";
import { stop } from "./setup/say.mjs";

const purpose = process.argv[2] ?? "app";
const [major, minor] = process.versions.node.split(".").map(Number);
if (major < 20 || (major === 20 && minor < 19)) {
	stop(
		`Starstave needs Node 20.19 or newer, and this is Node ${process.versions.node}: install Node 20 and try again.`,
	);
}
ensureDependencies();
if (purpose === "test") ensureChromium();
ensureBuild(purpose === "test" ? ["app", "cli"] : [purpose]);
