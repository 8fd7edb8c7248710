import { spawnSync } from "node:child_process";
import { copyFileSync, existsSync, mkdtempSync, readdirSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { decodeAudio } from "../../../src/core/decode/index.ts";
import { analyse } from "../../../src/core/music/index.ts";
import { beatsOfModule } from "../../oracles/module-rows.ts";
import { allowedLevels, beatF, signedError } from "../../oracles/music-metrics.ts";

// A check from outside: music by others, with beats that are exact because the player's own rows say where they are.
// Modules of Debian's free game packages, rendered by Debian's openmpt123.
/** Of those that the network was trained on: a guard against regressions. */
const TRAINED = [
	{ package: "bomberclone-data", file: "usr/share/games/bomberclone/music/cinderella_clown.mod" },
	{ package: "madbomber-data", file: "usr/share/games/madbomber/music/waterfal.mod" },
	{ package: "open-invaders-data", file: "usr/share/open-invaders/titlesong.mod" },
];
/** All of a package that nothing was trained on, tuned on or chosen by. */
const UNSEEN = ["finally", "hiscore", "hiscreen", "kaupunki", "klovninarki"].map((name) => ({
	package: "circuslinux-data",
	file: `usr/share/games/circuslinux/data/music/${name}.mod`,
}));

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
const locate = (modules: typeof TRAINED) =>
	modules.map((module) => ({ ...module, path: player ? findModule(module.package, module.file) : null }));
const trained = locate(TRAINED);
const unseen = locate(UNSEEN);
if (!player) console.warn("Skipped: the beats of tracker modules, because openmpt123 is not installed.");
else if ([...trained, ...unseen].some((module) => module.path === null)) {
	console.warn("Skipped: tracker modules whose Debian packages are neither installed nor to be had.");
}

/** Beats that are heard, and those of the rows. */
async function hear(path: string, file: string): Promise<{ beats: number[]; truth: number[] }> {
	const copy = join(folder, "module.mod");
	copyFileSync(path, copy);
	rmSync(`${copy}.wav`, { force: true });
	expect(runs("openmpt123", ["--quiet", "--batch", "--samplerate", "44100", "--render", copy])).toBe(true);
	const samples = await decodeAudio(new Uint8Array(readFileSync(`${copy}.wav`)), file);
	const analysis = analyse(samples);
	const truth = beatsOfModule(new Uint8Array(readFileSync(copy))).filter((time) => time < analysis.duration);
	return { beats: [...analysis.beats], truth };
}

describe("beats of tracker modules, exact from their rows", () => {
	for (const { file, path } of trained) {
		it.skipIf(path === null)(file.split("/").pop() ?? file, async () => {
			const { beats, truth } = await hear(path ?? "", file);
			expect(beatF(beats, truth)).toBeGreaterThan(0.95);
			expect(Math.abs(signedError(beats, truth))).toBeLessThan(0.01);
		});
	}

	it.skipIf(unseen.some(({ path }) => path === null))(
		"five that were never seen, one of them off the beat",
		async () => {
			const scores: number[] = [];
			const allowed: number[] = [];
			for (const { file, path } of unseen) {
				const { beats, truth } = await hear(path ?? "", file);
				scores.push(beatF(beats, truth));
				allowed.push(allowedLevels(beats, truth));
			}
			const mean = (values: readonly number[]): number => values.reduce((sum, x) => sum + x, 0) / values.length;
			// finally.mod is counted half a beat off, which costs its whole F and is allowed in AMLt.
			expect(mean(scores)).toBeGreaterThan(0.7);
			expect(mean(allowed)).toBeGreaterThan(0.85);
		},
	);
});
