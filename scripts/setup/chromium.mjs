import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";
import { say, stop } from "./say.mjs";

const usual = [
	"/usr/bin/chromium",
	"/usr/bin/chromium-browser",
	"/usr/bin/google-chrome",
	"/opt/google/chrome/chrome",
	"/snap/bin/chromium",
	"/Applications/Chromium.app/Contents/MacOS/Chromium",
	"/Applications/Google Chrome.app/Contents/MacOS/Google Chrome",
	"C:\\Program Files\\Google\\Chrome\\Application\\chrome.exe",
];

/** Where a Chromium stands: STARSTAVE_CHROMIUM, else the usual paths; null where there is none. */
export function findChromium() {
	const named = process.env.STARSTAVE_CHROMIUM;
	if (named) {
		if (!existsSync(named)) stop(`STARSTAVE_CHROMIUM names ${named}, but nothing is there: let it name a Chromium.`);
		return named;
	}
	return usual.find((path) => existsSync(path)) ?? null;
}

/** The browser tests need a Chromium: on Debian as root it is installed, elsewhere it is asked for. */
export function ensureChromium() {
	if (findChromium()) return;
	if (existsSync("/etc/debian_version") && process.getuid?.() === 0) {
		say("The browser tests need Chromium: installing Debian's package (apt-get install chromium) …");
		const options = { stdio: ["ignore", 2, 2], env: { ...process.env, DEBIAN_FRONTEND: "noninteractive" } };
		spawnSync("apt-get", ["update", "-q"], options);
		spawnSync("apt-get", ["install", "-y", "-q", "--no-install-recommends", "chromium"], options);
		if (findChromium()) return;
	}
	stop(
		"The browser tests need Chromium: install it, or let STARSTAVE_CHROMIUM name its program, and run npm test again.",
	);
}
