/**
 * Beats, bars and sections against the truth, by folder, beside other trackers.
 *
 *     npm run bench:music -- DIR [--part checking|tuning|all] [--only ours] [--folder NAME]
 *
 * DIR holds folders of NAME.wav + NAME.json { beats, downbeats?, boundaries?, duration } in seconds. `checking` (what is
 * reported) is the last fifth of each folder by name, `tuning` the rest. Writes bench-results/music.json.
 */
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { decodeAudio } from "../../src/core/decode/index.ts";
import { analyse } from "../../src/core/music/index.ts";
import { allowedLevels, beatF, bestLevelF, boundaryF, correctLevel, signedError } from "../oracles/music-metrics.ts";

interface Truth {
	readonly beats: number[];
	readonly downbeats?: number[];
	readonly boundaries?: number[];
}

/** What a tracker answers with; cpu in seconds. */
interface Answer {
	readonly beats: number[];
	readonly downbeats?: number[];
	readonly boundaries?: number[];
	readonly cpu: number;
}

interface Row {
	readonly tracker: string;
	readonly folder: string;
	readonly track: string;
	readonly figures: Record<string, number>;
}

const cpuOf = (usage: NodeJS.CpuUsage): number => (usage.user + usage.system) / 1e6;

async function hearOurs(file: string): Promise<Answer & { minutes: number }> {
	const start = process.cpuUsage();
	const samples = await decodeAudio(new Uint8Array(readFileSync(file)), file);
	const analysis = analyse(samples);
	const cpu = cpuOf(process.cpuUsage(start));
	return {
		beats: [...analysis.beats],
		downbeats: analysis.bars.map((bar) => analysis.beats[bar.beat]),
		boundaries: analysis.sections.slice(1).map((section) => section.start),
		cpu,
		minutes: analysis.duration / 60,
	};
}

interface TempoTracker {
	readonly beats: number[];
}

/** The npm package music-tempo (Dixon 2001); its beats come in seconds for 44.1 kHz. */
async function hearMusicTempo(file: string): Promise<Answer | null> {
	const { default: MusicTempo }: { default: new (audio: Float32Array) => TempoTracker } = await import(
		/* @vite-ignore */ "music-tempo"
	);
	const samples = await decodeAudio(new Uint8Array(readFileSync(file)), file);
	const mono = samples.channels[0].map(
		(_, i) => samples.channels.reduce((sum, x) => sum + x[i], 0) / samples.channels.length,
	);
	const start = process.cpuUsage();
	try {
		const beats = [...new MusicTempo(mono).beats].map((time) => (time * 44_100) / samples.sampleRate);
		return { beats, cpu: cpuOf(process.cpuUsage(start)) };
	} catch {
		return { beats: [], cpu: cpuOf(process.cpuUsage(start)) };
	}
}

const hasAubio = (): boolean => spawnSync("aubiotrack", ["--help"], { stdio: "ignore" }).error === undefined;

/** Debian's aubiotrack; its CPU time is read from the shell's own account. */
function hearAubio(file: string): Answer {
	const script = 'TIMEFORMAT="%U %S"; time aubiotrack -i "$0" 2>/dev/null';
	const run = spawnSync("bash", ["-c", script, file], { encoding: "utf8", maxBuffer: 1 << 26 });
	const numbers = (text: string): number[] => text.trim().split(/\s+/).map(Number.parseFloat).filter(Number.isFinite);
	const cpu = numbers(run.stderr).reduce((sum, x) => sum + x, 0);
	const beats = numbers(run.stdout);
	return { beats, cpu };
}

function score(answer: Answer, truth: Truth, minutes: number): Record<string, number> {
	const figures: Record<string, number> = {
		F: beatF(answer.beats, truth.beats),
		best: bestLevelF(answer.beats, truth.beats),
		CMLt: correctLevel(answer.beats, truth.beats),
		AMLt: allowedLevels(answer.beats, truth.beats),
		error: signedError(answer.beats, truth.beats) * 1000,
		cpu: answer.cpu / minutes,
	};
	if (answer.downbeats && truth.downbeats) figures.downbeat = beatF(answer.downbeats, truth.downbeats);
	if (answer.boundaries && truth.boundaries) {
		figures["section0.5"] = boundaryF(answer.boundaries, truth.boundaries, 0.5);
		figures.section3 = boundaryF(answer.boundaries, truth.boundaries, 3);
	}
	return figures;
}

const COLUMNS = ["F", "best", "CMLt", "AMLt", "downbeat", "section0.5", "section3", "error", "cpu"];

function summarise(
	rows: readonly Row[],
): { tracker: string; folder: string; n: number; figures: Record<string, number> }[] {
	const keys = [...new Set(rows.map((row) => `${row.folder}\t${row.tracker}`))].sort();
	return keys.map((key) => {
		const [folder, tracker] = key.split("\t");
		const chosen = rows.filter((row) => row.folder === folder && row.tracker === tracker);
		const figures: Record<string, number> = {};
		for (const column of COLUMNS) {
			const values = chosen.map((row) => row.figures[column]).filter((x) => Number.isFinite(x));
			if (values.length === 0) continue;
			values.sort((a, b) => a - b);
			const median = column === "error" || column === "cpu";
			figures[column] = median
				? values[Math.floor(values.length / 2)]
				: values.reduce((sum, x) => sum + x, 0) / values.length;
		}
		return { tracker, folder, n: chosen.length, figures };
	});
}

function printTable(rows: readonly Row[]): void {
	const width = 11;
	console.log(
		`${"folder".padEnd(14)}${"tracker".padEnd(13)}${"n".padStart(4)}${COLUMNS.map((c) => c.padStart(width)).join("")}`,
	);
	for (const { folder, tracker, n, figures } of summarise(rows)) {
		const cells = COLUMNS.map((c) => (figures[c] === undefined ? "–" : figures[c].toFixed(c === "error" ? 1 : 3)));
		console.log(
			`${folder.padEnd(14)}${tracker.padEnd(13)}${String(n).padStart(4)}${cells.map((c) => c.padStart(width)).join("")}`,
		);
	}
	console.log(
		"error: median signed error in ms; cpu: median CPU seconds a minute of audio, decoding included for ours",
	);
}

const option = (name: string, fallback: string): string => {
	const at = process.argv.indexOf(`--${name}`);
	return at < 0 ? fallback : (process.argv[at + 1] ?? fallback);
};

async function run(): Promise<void> {
	const dir = process.argv[2];
	if (!dir || !existsSync(dir)) throw new Error("name a folder that holds folders of NAME.wav and NAME.json");
	const part = option("part", "checking");
	const only = option("only", "all");
	const wanted = option("folder", "");
	const rows: Row[] = [];
	const aubio = only === "all" && hasAubio();
	for (const folder of readdirSync(dir).sort()) {
		if (wanted && folder !== wanted) continue;
		const path = join(dir, folder);
		const tracks = (existsSync(path) ? readdirSync(path) : [])
			.filter((name) => name.endsWith(".wav") && existsSync(join(path, name.replace(/wav$/, "json"))))
			.sort();
		const split = Math.floor((tracks.length * 4) / 5);
		const chosen = part === "all" ? tracks : part === "tuning" ? tracks.slice(0, split) : tracks.slice(split);
		for (const name of chosen) {
			const file = join(path, name);
			const truth = JSON.parse(readFileSync(file.replace(/wav$/, "json"), "utf8")) as Truth;
			const ours = await hearOurs(file);
			const add = (tracker: string, answer: Answer) =>
				rows.push({ tracker, folder, track: name, figures: score(answer, truth, ours.minutes) });
			add("starstave", ours);
			if (only === "all") {
				const other = await hearMusicTempo(file);
				if (other) add("music-tempo", other);
			}
			if (aubio) add("aubiotrack", hearAubio(file));
			process.stderr.write(".");
		}
	}
	process.stderr.write("\n");
	printTable(rows);
	mkdirSync("bench-results", { recursive: true });
	writeFileSync(
		join("bench-results", "music.json"),
		JSON.stringify({ part, folders: summarise(rows), rows }, null, "\t"),
	);
}

await run();
