import { spawnSync } from "node:child_process";
import { copyFileSync, existsSync, mkdtempSync, readdirSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { decodeAudio } from "../../../src/core/decode/index.ts";
import { analyse } from "../../../src/core/music/index.ts";
import { beatsOfModule } from "../../oracles/module-rows.ts";
import { beatF, bestLevelF, signedError } from "../../oracles/music-metrics.ts";

// A check from outside: music by others, with beats that are exact because the player's own rows say where they are.
// Modules of Debian's free game packages, rendered by Debian's openmpt123.
const MODULES = [
	{ package: "bomberclone-data", file: "usr/share/games/bomberclone/music/cinderella_clown.mod" },
	{ package: "madbomber-data", file: "usr/share/games/madbomber/music/waterfal.mod" },
	{ package: "open-invaders-data", file: "usr/share/open-invaders/titlesong.mod" },
];

const folder = mkdtempSync(join(tmpdir(), "starstave-modules-"));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const runs = (command: string, args: string[], cwd = folder): boolean => {
	const { status, error } = spawnSync(command, args, { cwd, stdio: "ignore", timeout: 60_000 });
	return !error && status === 0;
};

/** The module where its package is installed, or out of the package itself where apt can fetch it; null otherwise. */
function findModule(name: string, file: string): string | null {
	if (existsSync(`/${file}`)) return `/${file}`;
	const tree = join(folder, name);
	if (!existsSync(tree)) {
		if (!runs("apt-get", ["download", "-q", name])) return null;
		const archive = readdirSync(folder).find((entry) => entry.startsWith(`${name}_`) && entry.endsWith(".deb"));
		if (!archive || !runs("dpkg-deb", ["-x", archive, tree])) return null;
	}
	return existsSync(join(tree, file)) ? join(tree, file) : null;
}

const player = runs("openmpt123", ["--version"]);
const found = MODULES.map((module) => ({ ...module, path: player ? findModule(module.package, module.file) : null }));
if (!player) console.warn("Skipped: the beats of tracker modules, because openmpt123 is not installed.");
else if (found.some((module) => module.path === null)) {
	console.warn("Skipped: tracker modules whose Debian packages are neither installed nor to be had.");
}

describe("beats of tracker modules, exact from their rows", () => {
	for (const { file, path } of found) {
		it.skipIf(path === null)(file.split("/").pop() ?? file, async () => {
			const copy = join(folder, "module.mod");
			copyFileSync(path ?? "", copy);
			rmSync(`${copy}.wav`, { force: true });
			expect(runs("openmpt123", ["--quiet", "--batch", "--samplerate", "44100", "--render", copy])).toBe(true);
			const samples = await decodeAudio(new Uint8Array(readFileSync(`${copy}.wav`)), file);
			const analysis = analyse(samples);
			const truth = beatsOfModule(new Uint8Array(readFileSync(copy))).filter((time) => time < analysis.duration);
			// At 187 beats a minute waterfal.mod is heard at half: where the beats are is held here, the level by the bench.
			expect(bestLevelF([...analysis.beats], truth)).toBeGreaterThan(0.95);
			if (!file.endsWith("waterfal.mod")) expect(beatF([...analysis.beats], truth)).toBeGreaterThan(0.95);
			expect(Math.abs(signedError([...analysis.beats], truth))).toBeLessThan(0.01);
		});
	}
});
