/**
 * Retiming against known edits, by kind, beside one global offset and stretch.
 *
 *     npm run bench:retime -- DIR [--kind NAME] [--different DIR2] [--list]
 *
 * DIR holds NAME.KIND.wav or .mp3 with NAME.KIND.json { original, kind, kept [[old0, old1, new0, new1]], duration } in
 * seconds; beside the original stands its JSON with `beats` and `downbeats`. A cue is put on every beat of the original;
 * it is right where it lands within the kind's tolerance of a true place, or where the samples around both are the same.
 * --different DIR2: pairs of neighbouring WAV files of DIR2, which are different music: nothing may be carried.
 * --list prints every pair. Each pair runs in a process of its own, so that seconds and memory are its own. Writes
 * bench-results/retime.json.
 */
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { basename, join } from "node:path";
import { decodeAudio, type Samples } from "../../src/core/decode/index.ts";
import { isCarried, mapEdit, retimeShow } from "../../src/core/retime/index.ts";
import { createShow, type Show, type Soundtrack, toOrdered } from "../../src/core/show/index.ts";
import { fitGlobally } from "./retime-baseline.ts";

/** Seconds. */
const TOLERANCE: Record<string, number> = {
	cut: 0.001,
	repeat: 0.001,
	insert: 0.001,
	intro: 0.001,
	trim: 0.001,
	master: 0.005,
	mp3: 0.005,
	rate: 0.005,
	tempo: 0.015,
	mix: 0.015,
};
const EDGE = 0.05;
/** Seconds: a moment this close before the end of what was kept belongs to what comes after. */
const ON_EDGE = 1e-4;
/** Seconds from a true joint within which a mark for review is expected. */
const NEAR_JOINT = 1;

interface Truth {
	readonly original: string;
	readonly kind: string;
	readonly kept: readonly (readonly [old0: number, old1: number, new0: number, new1: number])[];
}

interface Figures {
	readonly name: string;
	readonly kind: string;
	readonly surviving: number;
	readonly right: number;
	readonly worst: number;
	readonly orphansRight: number;
	readonly orphansSaid: number;
	readonly orphansTrue: number;
	readonly reviewAway: number;
	readonly cues: number;
	readonly edges: number;
	readonly edgesRight: number;
	readonly seconds: number;
	readonly cpu: number;
	/** CPU seconds of a hundred million multiply-adds in the same process just before and after: machines are shared. */
	readonly reference: number;
	readonly megabytes: number;
	readonly minutes: number;
	readonly baselineRight: number;
	readonly baselineOrphansRight: number;
	readonly baselineOrphansSaid: number;
}

const readAudio = async (file: string): Promise<Samples> =>
	decodeAudio(new Uint8Array(readFileSync(file)), basename(file));

function truePlaces(truth: Truth, time: number): number[] {
	return truth.kept
		.filter(([from, to]) => time >= from - ON_EDGE && time < to - ON_EDGE)
		.map(([old0, old1, new0, new1]) => new0 + ((time - old0) * (new1 - new0)) / (old1 - old0));
}

/** True where ±0.2 s of samples around an old and a new time are the same, but for a few clicks. */
function sameAround(old: Samples, current: Samples, oldTime: number, newTime: number): boolean {
	if (old.sampleRate !== current.sampleRate) return false;
	const [a] = old.channels;
	const [b] = current.channels;
	const reach = Math.round(0.2 * old.sampleRate);
	const shift = Math.round((newTime - oldTime) * old.sampleRate);
	const centre = Math.round(newTime * old.sampleRate);
	let unlike = 0;
	for (let i = centre - reach; i <= centre + reach; i++) {
		if (Math.abs((a[i - shift] ?? 0) - (b[i] ?? 0)) > 3 / 32768) unlike++;
	}
	return unlike < 0.1 * reach;
}

/** The old time that a new one truly came from, or null. */
function trueSource(truth: Truth, time: number): number | null {
	const piece = truth.kept.find(([, , new0, new1]) => time >= new0 && time < new1);
	if (piece === undefined) return null;
	const [old0, old1, new0, new1] = piece;
	return old0 + ((time - new0) * (old1 - old0)) / (new1 - new0);
}

function showOnBeats(beats: readonly number[], downbeats: readonly number[], samples: Samples): Show {
	const starts = downbeats.map((time) => beats.findIndex((beat) => Math.abs(beat - time) < 1e-3)).filter((i) => i >= 0);
	const cue = (at: number) => ({
		id: `c${at}`,
		number: `${at + 1}`,
		kind: "intensity" as const,
		at,
		length: 0,
		group: "all",
		called: false,
		name: "",
		note: "",
		level: 1,
		fade: 0,
	});
	return {
		...createShow(10),
		soundtrack: soundtrackOf("old.wav", samples),
		grid: {
			beats,
			bars: starts.map((beat, i) => ({ beat, beatsPerBar: (starts[i + 1] ?? beat + 4) - beat })),
			source: "edited",
		},
		cues: toOrdered(beats.map((_, at) => cue(at))),
	};
}

const soundtrackOf = (file: string, samples: Samples): Soundtrack => ({
	file,
	sha256: "0".repeat(64),
	duration: samples.channels[0].length / samples.sampleRate,
	sampleRate: samples.sampleRate,
	channels: samples.channels.length,
});

function referenceSeconds(): number {
	const values = new Float64Array(8192).fill(1.1);
	const started = process.cpuUsage();
	let sum = 0;
	for (let round = 0; round < 12_207; round++) {
		for (let i = 0; i < 8192; i++) sum += values[i] * values[(i + round) & 8191];
	}
	const { user, system } = process.cpuUsage(started);
	return sum > 0 ? (user + system) / 1e6 : 0;
}

async function measureOne(json: string): Promise<Figures> {
	const truth: Truth = JSON.parse(readFileSync(json, "utf8"));
	const { beats, downbeats }: { beats: number[]; downbeats: number[] } = JSON.parse(
		readFileSync(truth.original.replace(/\.wav$/, ".json"), "utf8"),
	);
	const audio = [json.replace(/json$/, "wav"), json.replace(/json$/, "mp3")].find((file) => existsSync(file)) as string;
	const old = await readAudio(truth.original);
	const current = await readAudio(audio);
	const referenceBefore = referenceSeconds();
	const started = performance.now();
	const cpuStarted = process.cpuUsage();
	const map = mapEdit(old, current, { beats, downbeats });
	const result = retimeShow(showOnBeats(beats, downbeats, old), map, soundtrackOf("new.wav", current));
	const cpu = process.cpuUsage(cpuStarted);
	const seconds = (performance.now() - started) / 1000;
	const reference = (referenceBefore + referenceSeconds()) / 2;
	const megabytes = process.resourceUsage().maxRSS / 1024;
	const tolerance = TOLERANCE[truth.kind] ?? 0.015;
	const tally = { surviving: 0, right: 0, worst: 0, orphansRight: 0, orphansSaid: 0, orphansTrue: 0, reviewAway: 0 };
	const baseline = { baselineRight: 0, baselineOrphansRight: 0, baselineOrphansSaid: 0 };
	const fit = fitGlobally(old, current);
	const duration = current.channels[0].length / current.sampleRate;
	const joints = truth.kept.flatMap(([, , new0, new1]) => [new0, new1]);
	for (const move of result.cues) {
		const places = truePlaces(truth, move.oldTime);
		const said = move.newTime;
		if (said === null) tally.orphansSaid++;
		const guess = fit.offset + fit.stretch * move.oldTime;
		const outside = guess < 0 || guess > duration;
		if (outside) baseline.baselineOrphansSaid++;
		const source = said === null ? null : trueSource(truth, said);
		// Where bars repeat sample for sample, the other one is as good.
		const equivalent = said !== null && source !== null && sameAround(old, old, move.oldTime, source);
		if (places.length === 0) {
			tally.orphansTrue++;
			if (said === null || equivalent) tally.orphansRight++;
			if (outside) baseline.baselineOrphansRight++;
			continue;
		}
		tally.surviving++;
		const off = said === null ? Number.POSITIVE_INFINITY : Math.min(...places.map((place) => Math.abs(place - said)));
		if (off <= tolerance || equivalent) tally.right++;
		if (off < 1) tally.worst = Math.max(tally.worst, off);
		if (Math.min(...places.map((place) => Math.abs(place - guess))) <= tolerance) baseline.baselineRight++;
		const away = said !== null && !joints.some((joint) => Math.abs(joint - said) <= NEAR_JOINT);
		if (move.status === "review" && away) tally.reviewAway++;
	}
	let edgesRight = 0;
	for (const [old0, old1, new0, new1] of truth.kept) {
		for (const [edge, oldEdge, newEdge] of [[0, old0, new0] as const, [1, old1, new1] as const]) {
			const hit = map.stretches.some(
				(stretch) =>
					isCarried(stretch) &&
					Math.abs(stretch.new[edge] - newEdge) <= EDGE &&
					Math.abs(stretch.old[edge] - oldEdge) <= EDGE,
			);
			if (hit) edgesRight++;
		}
	}
	return {
		name: basename(json, ".json"),
		kind: truth.kind,
		...tally,
		...baseline,
		cues: result.cues.length,
		edges: 2 * truth.kept.length,
		edgesRight,
		seconds,
		cpu: (cpu.user + cpu.system) / 1e6,
		reference,
		megabytes,
		minutes: duration / 60,
	};
}

/** Old seconds that were carried between two pieces of different music: there should be none. */
async function measureDifferent(first: string, second: string): Promise<number> {
	const map = mapEdit(await readAudio(first), await readAudio(second));
	return map.verdict === "different"
		? 0
		: map.stretches.filter(isCarried).reduce((sum, { new: [from, to] }) => sum + to - from, 0);
}

function inOwnProcess<T>(...args: string[]): T {
	const run = spawnSync(process.execPath, [process.argv[1], ...args], { encoding: "utf8", maxBuffer: 1 << 26 });
	if (run.status !== 0) throw new Error(`${args.join(" ")} failed:\n${run.stderr}`);
	return JSON.parse(run.stdout) as T;
}

const sum = (rows: readonly Figures[], of: (row: Figures) => number): number =>
	rows.reduce((all, row) => all + of(row), 0);
const share = (part: number, whole: number): string => (whole === 0 ? "–" : `${((100 * part) / whole).toFixed(2)} %`);
const middle = (values: readonly number[]): number =>
	[...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? 0;

function printTable(rows: readonly Figures[]): void {
	const head = [
		"kind",
		"pairs",
		"right",
		"worst ms",
		"orphan P",
		"orphan R",
		"edges",
		"review away",
		"s/4 min",
		"× ref",
		"MB",
	];
	const lines = [[...head, "| baseline", "orphan R"]];
	for (const kind of [...Object.keys(TOLERANCE).filter((one) => rows.some((row) => row.kind === one)), "all"]) {
		const of = kind === "all" ? rows : rows.filter((row) => row.kind === kind);
		const wrongly = sum(of, (row) => row.orphansSaid) - sum(of, (row) => row.orphansRight);
		lines.push([
			kind,
			`${of.length}`,
			share(
				sum(of, (row) => row.right),
				sum(of, (row) => row.surviving),
			),
			(1000 * Math.max(...of.map((row) => row.worst))).toFixed(2),
			share(
				sum(of, (row) => row.orphansSaid) - Math.max(0, wrongly),
				sum(of, (row) => row.orphansSaid),
			),
			share(
				sum(of, (row) => row.orphansRight),
				sum(of, (row) => row.orphansTrue),
			),
			share(
				sum(of, (row) => row.edgesRight),
				sum(of, (row) => row.edges),
			),
			share(
				sum(of, (row) => row.reviewAway),
				sum(of, (row) => row.cues),
			),
			middle(of.map((row) => (row.cpu * 4) / row.minutes)).toFixed(2),
			middle(of.map((row) => (row.cpu * 4) / row.minutes / row.reference)).toFixed(1),
			Math.max(...of.map((row) => row.megabytes)).toFixed(0),
			`| ${share(
				sum(of, (row) => row.baselineRight),
				sum(of, (row) => row.surviving),
			)}`,
			share(
				sum(of, (row) => row.baselineOrphansRight),
				sum(of, (row) => row.orphansTrue),
			),
		]);
	}
	const widths = lines[0].map((_, column) => Math.max(...lines.map((line) => line[column].length)));
	for (const line of lines) console.log(line.map((cell, i) => cell.padStart(widths[i])).join("  "));
}

async function main(args: string[]): Promise<void> {
	if (args[0] === "--one") {
		console.log(JSON.stringify(await measureOne(args[1])));
		return;
	}
	if (args[0] === "--pair") {
		console.log(JSON.stringify(await measureDifferent(args[1], args[2])));
		return;
	}
	const option = (name: string): string | null => {
		const at = args.indexOf(name);
		return at >= 0 ? (args[at + 1] ?? null) : null;
	};
	const folder = args[0];
	if (folder === undefined || !existsSync(folder)) {
		console.error("bench:retime wants a folder of edits: npm run bench:retime -- DIR");
		process.exitCode = 1;
		return;
	}
	const kind = option("--kind");
	const files = readdirSync(folder).filter(
		(file) => file.endsWith(".json") && (kind === null || file.includes(`.${kind}.`)),
	);
	const rows: Figures[] = [];
	for (const file of files.sort()) {
		const row = inOwnProcess<Figures>("--one", join(folder, file));
		rows.push(row);
		const faults = row.right < row.surviving || row.orphansRight < row.orphansTrue || row.edgesRight < row.edges;
		if (args.includes("--list") || faults) {
			const orphans = `${row.orphansRight}/${row.orphansTrue} orphans`;
			console.log(`${row.name}: ${row.right}/${row.surviving} right, ${orphans}, ${row.edgesRight}/${row.edges} edges`);
		}
	}
	printTable(rows);
	const other = option("--different");
	let carried: number[] = [];
	if (other !== null) {
		const wavs = readdirSync(other)
			.filter((file) => file.endsWith(".wav"))
			.sort();
		carried = wavs.slice(1).map((file, i) => inOwnProcess<number>("--pair", join(other, wavs[i]), join(other, file)));
		console.log(`different music: ${carried.filter((s) => s > 0).length} of ${carried.length} pairs carried anything`);
	}
	mkdirSync("bench-results", { recursive: true });
	writeFileSync("bench-results/retime.json", JSON.stringify({ rows, different: carried }, null, "\t"));
}

await main(process.argv.slice(2));
