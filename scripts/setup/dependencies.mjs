import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { root, say, stop } from "./say.mjs";

const lock = join(root, ".setup", "install.pid");

/** Installs the packages of the lock file when node_modules is missing, half made or of another lock file. */
export function ensureDependencies() {
	if (complete()) return;
	takeLock();
	try {
		if (complete()) return;
		say("Setting up: installing the packages of package-lock.json …");
		for (const attempt of [1, 2]) {
			// A half tree that an interrupted install left is believed by the next one: from the second try on, start empty.
			if (attempt === 2) rmSync(join(root, "node_modules"), { recursive: true, force: true });
			const run = spawnSync("npm", ["ci", "--include=dev", "--no-audit", "--no-fund", "--loglevel=error"], {
				cwd: root,
				stdio: ["ignore", 2, 2],
				shell: process.platform === "win32",
			});
			if (run.status === 0 && complete()) return;
		}
	} finally {
		rmSync(lock, { force: true });
	}
	stop(
		"The packages could not be installed: check that this machine reaches the npm registry, then run the command again.",
	);
}

/** Every package of the lock file that belongs on this machine is there, in its version. */
function complete() {
	const wanted = readJson(join(root, "package-lock.json"))?.packages;
	if (!wanted) stop("package-lock.json is missing or broken: restore it from the repository.");
	const hidden = readJson(join(root, "node_modules", ".package-lock.json"))?.packages;
	if (!hidden) return false;
	for (const [path, entry] of Object.entries(wanted)) {
		if (path === "" || entry.link) continue;
		if (!hidden[path]) {
			if (entry.optional || entry.peer) continue;
			return false;
		}
		if (hidden[path].version !== entry.version) return false;
		if (!existsSync(join(root, path, "package.json"))) return false;
	}
	return true;
}

/** One install at a time; a lock whose process is gone is stale. */
function takeLock() {
	mkdirSync(join(root, ".setup"), { recursive: true });
	for (let waited = 0; ; waited++) {
		try {
			writeFileSync(lock, String(process.pid), { flag: "wx" });
			return;
		} catch {
			const pid = Number(readText(lock));
			if (!alive(pid)) {
				rmSync(lock, { force: true });
				continue;
			}
			if (waited === 0) say(`Another set-up (process ${pid}) is at work here: waiting for it …`);
			if (waited > 600) stop(`Process ${pid} has been setting up for ten minutes: end it, then run the command again.`);
			Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 1000);
		}
	}
}

function alive(pid) {
	if (!(pid > 0)) return false;
	try {
		process.kill(pid, 0);
		return true;
	} catch (error) {
		return error.code === "EPERM";
	}
}

function readText(path) {
	try {
		return readFileSync(path, "utf8");
	} catch {
		return "";
	}
}

function readJson(path) {
	try {
		return JSON.parse(readText(path));
	} catch {
		return null;
	}
}
