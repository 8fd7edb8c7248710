import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { copyFileSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { unzipSync } from "fflate";
import Papa from "papaparse";
import { beforeAll, describe, expect, it } from "vitest";
import { judgeFlightPaths, ORACLE_TOLERANCE } from "../oracles/judge-flight-paths.ts";
import { readTable } from "../oracles/read-flight-paths.ts";
import { makeTrack, writeWav } from "./make-track.ts";
import { buildStarstave, complaint, type Run, root } from "./run-starstave.ts";

/** The whole job on the command line, on a piece made for it: track → show → check → files for the crew. */
const { run, path } = buildStarstave();
const json = (result: Run) => JSON.parse(result.stdout);
const sha256 = (bytes: Uint8Array): string => createHash("sha256").update(bytes).digest("hex");
/** Seconds of the piece; 16 bars of four at 120, after which the first four come again. */
const SECONDS = 40;
let drafted: Run;

beforeAll(() => {
	writeFileSync(path("piece.wav"), makeTrack({ seconds: SECONDS, channels: 2 }));
	drafted = run("draft", "piece.wav", "--drones", "30", "--out", "piece.starstave.json", "--json", "-");
	mkdirSync(path("apart"));
	copyFileSync(path("piece.starstave.json"), path("apart/piece.starstave.json"));
});

describe("analyse", () => {
	it("answers with soundtrack, beats, bars, sections and loudness, the JSON alone on stdout", () => {
		const result = run("analyse", "piece.wav", "--json", "-");
		expect(result.code).toBe(0);
		expect(result.stderr).toMatch(/analyse: /);
		const heard = json(result);
		expect(heard.soundtrack).toEqual({
			file: "piece.wav",
			sha256: sha256(readFileSync(path("piece.wav"))),
			duration: SECONDS,
			sampleRate: 22050,
			channels: 2,
		});
		// Made at 120 from 0 s: the times of the beats are known.
		expect(heard.tempo.bpm).toBeCloseTo(120, 0);
		for (const beat of heard.beats) expect(Math.abs(2 * beat - Math.round(2 * beat)) / 2).toBeLessThan(0.03);
		expect(heard.downbeats).toEqual(heard.bars.map((bar: { beat: number }) => heard.beats[bar.beat]));
		expect(heard.bars[3]).toEqual({ beat: heard.bars[3].beat, beatsPerBar: 4 });
		expect(heard.sections[0]).toEqual({ start: expect.any(Number), end: expect.any(Number), letter: "A" });
		expect(heard.confidence).toBeGreaterThan(0);
		expect(heard.confidence).toBeLessThanOrEqual(1);
		expect(heard.loudness.integrated).toBeLessThan(0);
		expect(heard.loudness.shortTerm.length).toBeGreaterThan(SECONDS * heard.loudness.rate * 0.9);
		expect(Object.keys(heard.timing)).toEqual(["decode", "analyse", "cpu"]);
	});

	it("replaces the JSON of an earlier answer without being asked", () => {
		writeFileSync(path("answer.json"), "old");
		expect(run("analyse", "piece.wav", "--json", "answer.json").stdout).toMatch(/1(19|20)\.\d beats a minute/);
		expect(JSON.parse(readFileSync(path("answer.json"), "utf8")).soundtrack.file).toBe("piece.wav");
	});
});

describe("draft", () => {
	it("writes a show that flies as it stands, with a transition at every section boundary at least", () => {
		expect(drafted.code).toBe(0);
		const { cues, check } = json(drafted);
		const show = JSON.parse(readFileSync(path("piece.starstave.json"), "utf8"));
		for (const kind of ["colour", "intensity", "transition"]) {
			expect(cues[kind]).toBe(show.cues.filter((cue: { kind: string }) => cue.kind === kind).length);
		}
		expect(cues.transition).toBeGreaterThanOrEqual(show.sections.length - 1);
		expect(check.flies).toBe(true);
		expect(show.fleet.count).toBe(30);
		expect(show.soundtrack.file).toBe("piece.wav");
	});

	it("gives the same show for the same music, and packs the soundtrack where the name ends in .starstave", () => {
		expect(run("draft", "piece.wav", "--drones", "30", "--out", "again.starstave.json").code).toBe(0);
		expect(readFileSync(path("again.starstave.json"), "utf8")).toBe(readFileSync(path("piece.starstave.json"), "utf8"));
		expect(run("draft", "piece.wav", "--drones", "30", "--out", "piece.starstave").code).toBe(0);
		const packed = unzipSync(readFileSync(path("piece.starstave")));
		expect(Object.keys(packed).sort()).toEqual(["piece.wav", "routine.json"]);
		expect(sha256(packed["piece.wav"])).toBe(sha256(readFileSync(path("piece.wav"))));
		const checked = run("check", "piece.starstave", "--json", "-");
		expect(checked.code).toBe(0);
		expect(json(checked).notes.join(" ")).not.toMatch(/not at hand/);
	});

	it("replaces a show only with --force", () => {
		writeFileSync(path("mine.starstave.json"), "{}");
		const words = ["draft", "piece.wav", "--drones", "3", "--out", "mine.starstave.json"];
		expect(run(...words).code).toBe(1);
		expect(readFileSync(path("mine.starstave.json"), "utf8")).toBe("{}");
		expect(run(...words, "--force").code).toBe(0);
		expect(JSON.parse(readFileSync(path("mine.starstave.json"), "utf8")).fleet.count).toBe(3);
	});

	it("cuts for a single drone", () => {
		const result = run("draft", "piece.wav", "--drones", "1", "--out", "one.starstave.json", "--json", "-");
		expect(result.code).toBe(0);
		expect(json(result).check.launch.gap).toBeNull();
	});
});

describe("check", () => {
	it("answers for launch, landing, every transition, every formation, endurance and flashes", () => {
		const result = run("check", "piece.starstave.json", "--soundtrack", "piece.wav", "--json", "-");
		expect(result.code).toBe(0);
		const check = json(result);
		const keys = [
			"id",
			"from",
			"to",
			"departs",
			"arrives",
			"available",
			"needed",
			"slack",
			"slackBeats",
			"straightLineBound",
			"verdicts",
			"peak",
			"gap",
			"breach",
			"certificate",
			"remedies",
		];
		expect(check.flies).toBe(true);
		for (const leg of [check.launch, check.landing, ...check.transitions]) {
			expect(Object.keys(leg).sort()).toEqual([...keys].sort());
			expect(leg.slack).toBeCloseTo(leg.available - leg.needed, 9);
			expect(leg.needed).toBeGreaterThanOrEqual(leg.straightLineBound - 1e-9);
			expect(Object.keys(leg.peak)).toEqual(["horizontal", "climb", "descent", "acceleration", "jerk"]);
			expect(Object.keys(leg.gap).sort()).toEqual(["distance", "drones", "time"]);
			expect(leg.certificate).toEqual({ assignment: expect.any(String), separation: expect.any(String) });
		}
		for (const leg of check.transitions) {
			expect(Object.keys(leg.departs)).toEqual(["beat", "time"]);
			expect(check.timing.prove[leg.id]).toBeGreaterThanOrEqual(0);
		}
		for (const formation of check.formations) expect(Object.keys(formation)).toEqual(["id", "gap", "verdicts"]);
		expect(check.endurance.airborne).toBeLessThan(check.endurance.limit);
		expect(Array.isArray(check.flashes)).toBe(true);
		expect(Object.keys(check.care)).toEqual(["fallZone", "wakeHolds", "wakeRemedies", "asFlown", "airtime"]);
		expect(check.care.fallZone.outline.length).toBeGreaterThan(8);
		expect(check.care.asFlown.legs.map(({ id }: { id: string }) => id)).toEqual(
			check.transitions.map(({ id }: { id: string }) => id),
		);
		// From the first motor start to the last landing no drone runs longer.
		expect(check.care.airtime.longest.seconds).toBeLessThanOrEqual(check.endurance.airborne + 1e-9);
	});

	it("plans a large fleet in workers", () => {
		const grid = { kind: "grid", columns: 20, rows: 20, pitch: 3 };
		const formations = [{ id: "f1", shape: grid, place: { position: [0, 40, 40] } }];
		const show = { format: "starstave-show", version: 1, fleet: { count: 400 }, opening: "f1", formations };
		writeFileSync(path("large.starstave.json"), JSON.stringify(show));
		const result = run("check", "large.starstave.json", "--json", "-");
		expect([0, 2]).toContain(result.code);
		expect(json(result).launch.verdicts).toContain("flies");
		expect(json(result).timing.plan.launch).toBeGreaterThan(0);
	});

	it("exits 2 where a transition has too little time, and says which", () => {
		const show = JSON.parse(readFileSync(path("piece.starstave.json"), "utf8"));
		const cue = show.cues.find((one: { kind: string }) => one.kind === "transition");
		cue.length = 0.25;
		writeFileSync(path("hasty.starstave.json"), JSON.stringify(show));
		const result = run("check", "hasty.starstave.json", "--json", "-");
		expect(result.code).toBe(2);
		const check = json(result);
		expect(check.flies).toBe(false);
		const leg = check.transitions.find(({ id }: { id: string }) => id === cue.id);
		expect(leg.verdicts).toContain("too-fast");
		expect(leg.slack).toBeLessThan(0);
		expect(run("check", "hasty.starstave.json").stdout).toMatch(/can't be flown as it stands/);
	});

	it("judges without the audio, and says what it could not judge", () => {
		const result = run("check", "apart/piece.starstave.json", "--json", "-");
		expect(result.code).toBe(0);
		const show = JSON.parse(readFileSync(path("piece.starstave.json"), "utf8"));
		const follows = show.cues.some((cue: { level?: unknown }) => typeof cue.level === "object");
		if (follows) expect(json(result).notes.join(" ")).toMatch(/not at hand/);
	});
});

describe("handoff", () => {
	let handed: Run;
	beforeAll(() => {
		handed = run("handoff", "piece.starstave.json", "--out", "crew", "--json", "-");
	});
	const file = (name: string): Uint8Array => readFileSync(join(path("crew"), name));

	it("leaves every file with its hash under one revision code", () => {
		expect(handed.code).toBe(0);
		const { files, revision } = json(handed);
		expect(readdirSync(path("crew")).sort()).toEqual([
			"cue-list.csv",
			"cue-list.json",
			"flight-paths.json",
			"flight-paths.zip",
			"manifest.json",
			"report.html",
			"routine.starstave.json",
		]);
		for (const { name, sha256: hash, bytes } of files) {
			expect(sha256(file(name))).toBe(hash);
			expect(file(name).length).toBe(bytes);
		}
		const text = (name: string): string => new TextDecoder().decode(file(name));
		const manifest = JSON.parse(text("manifest.json"));
		expect(manifest.files).toEqual(files.filter(({ name }: { name: string }) => name !== "manifest.json"));
		for (const name of ["cue-list.csv", "cue-list.json", "flight-paths.json", "manifest.json", "report.html"]) {
			expect(text(name)).toContain(revision);
		}
		expect(text("routine.starstave.json")).toBe(readFileSync(path("piece.starstave.json"), "utf8"));
	});

	it("leaves nothing half made beside it, and the same bytes a second time", () => {
		expect(run("handoff", "piece.starstave.json", "--out", "crew2").code).toBe(0);
		for (const name of readdirSync(path("crew"))) {
			expect(sha256(readFileSync(join(path("crew2"), name)))).toBe(sha256(file(name)));
		}
		expect(readdirSync(path(".")).filter((name) => name.endsWith(".part"))).toEqual([]);
	});

	it("lists every cue for the crew", () => {
		const { data, errors } = Papa.parse<Record<string, string>>(new TextDecoder().decode(file("cue-list.csv")), {
			header: true,
			skipEmptyLines: true,
		});
		expect(errors).toEqual([]);
		const show = JSON.parse(readFileSync(path("piece.starstave.json"), "utf8"));
		expect(data.length).toBe(show.cues.length);
		const starts = data.map((row) => Number(row.start_s));
		expect(starts).toEqual([...starts].sort((a, b) => a - b));
		for (const row of data) if (row.kind === "transition") expect(row.verdict).toMatch(/flies/);
	});

	it("flies as an oracle reads it back: from the take-off grid and back, every limit and spacing kept between rows", () => {
		const files = unzipSync(file("flight-paths.zip"));
		const about = JSON.parse(new TextDecoder().decode(files["flight-paths.json"]));
		expect(file("flight-paths.json")).toEqual(Buffer.from(files["flight-paths.json"]));
		for (const { name, sha256: hash } of about.files) expect(sha256(files[name])).toBe(hash);
		const { limits } = JSON.parse(readFileSync(path("piece.starstave.json"), "utf8")).fleet;
		const table = readTable(files, "positions", about.rates.positions);
		expect(table.drones).toBe(30);
		const verdict = judgeFlightPaths(table, limits);
		expect(verdict.broken).toEqual([]);
		expect(verdict.startHeight).toBeLessThan(ORACLE_TOLERANCE.ground);
		expect(verdict.endHeight).toBeLessThan(ORACLE_TOLERANCE.ground);
		// The show is a flight, not a fleet left on the ground.
		expect(verdict.horizontal).toBeGreaterThan(0.5);
		expect(table.times[0]).toBeLessThan(0);
		expect(table.times[table.times.length - 1]).toBeGreaterThan(SECONDS);
		const light = readTable(files, "light", about.rates.light);
		expect(light.drones).toBe(30);
		let brightest = 0;
		for (const value of light.values) {
			if (value > brightest) brightest = value;
		}
		expect(brightest).toBeGreaterThan(60);
		expect(brightest).toBeLessThanOrEqual(255);
		// Dark on the ground, before launch and after landing.
		expect(Math.max(...light.values.slice(0, 90))).toBe(0);
		expect(Math.max(...light.values.slice(-90))).toBe(0);
	});

	it("takes rates, timecode and its start", () => {
		const words = ["--rate", "20", "--light-rate", "25", "--timecode", "29.97", "--timecode-start", "02:00:00:00"];
		expect(run("handoff", "piece.starstave.json", "--out", "crew3", ...words).code).toBe(0);
		const about = JSON.parse(readFileSync(join(path("crew3"), "flight-paths.json"), "utf8"));
		expect(about.rates).toEqual({ positions: 20, light: 25 });
		const list = JSON.parse(readFileSync(join(path("crew3"), "cue-list.json"), "utf8"));
		expect(list.cues.every((cue: { startTimecode: string }) => /^0[12]:\d\d:\d\d;\d\d$/.test(cue.startTimecode))).toBe(
			true,
		);
	});

	it("writes nothing where the show can't be flown; as a draft everything but flight paths and light", () => {
		const refused = run("handoff", "hasty.starstave.json", "--out", "none", "--json", "-");
		expect(refused.code).toBe(2);
		expect(json(refused).files).toEqual([]);
		expect(readdirSync(path("."))).not.toContain("none");
		const draft = run("handoff", "hasty.starstave.json", "--out", "draft", "--draft", "--json", "-");
		expect(draft.code).toBe(2);
		expect(readdirSync(path("draft")).sort()).toEqual([
			"cue-list.csv",
			"cue-list.json",
			"manifest.json",
			"report.html",
			"routine.starstave.json",
		]);
		expect(readFileSync(join(path("draft"), "report.html"), "utf8")).toMatch(/DRAFT: .*Not for flight/);
		expect(JSON.parse(readFileSync(join(path("draft"), "manifest.json"), "utf8"))).toMatchObject({
			draft: true,
			flies: false,
		});
	});
});

describe("npm run starstave", () => {
	it("sets itself up and takes paths from where the user stands", () => {
		const npm = process.platform === "win32" ? "npm.cmd" : "npm";
		const words = ["--prefix", root, "run", "--silent", "starstave", "--", "check", "hasty.starstave.json"];
		const result = spawnSync(npm, words, { cwd: path("."), encoding: "utf8" });
		expect(result.stdout).toMatch(/^launch: flies/);
		expect(result.status).toBe(2);
	});
});

describe("retime", () => {
	it("moves nothing where the edit is the same file", () => {
		const words = ["retime", "piece.starstave.json", "piece.wav", "--out", "same.starstave.json", "--json", "-"];
		const result = run(...words);
		const { map, cues } = json(result);
		expect(map.map(({ kind }: { kind: string }) => kind)).toEqual(["kept"]);
		for (const cue of cues) expect(cue.newTime).toBeCloseTo(cue.oldTime, 9);
		expect(result.code).toBe(0);
	});

	it("carries the cues over a cut to the sample, and exits 2 for what needs review", () => {
		// Bars 5 to 8 are gone: seconds 8 to 16.
		const whole = readFileSync(path("piece.wav"));
		const second = 22050 * 4;
		writeFileSync(
			path("cut.wav"),
			Buffer.concat([whole.subarray(0, 44 + 8 * second), whole.subarray(44 + 16 * second)]),
		);
		const words = ["retime", "piece.starstave.json", "cut.wav", "--out", "cut.starstave.json", "--json", "-"];
		const result = run(...words);
		const { map, cues } = json(result);
		expect(map.map(({ kind }: { kind: string }) => kind)).toEqual(["kept", "cut", "kept"]);
		for (const { oldTime, newTime, status } of cues) {
			if (status !== "moved") continue;
			expect(newTime).toBeCloseTo(oldTime < 12 ? oldTime : oldTime - 8, 3);
		}
		const unsettled = cues.filter(({ status }: { status: string }) => status !== "moved").length;
		expect(result.code).toBe(unsettled > 0 ? 2 : 0);
		const show = JSON.parse(readFileSync(path("cut.starstave.json"), "utf8"));
		expect(show.soundtrack.file).toBe("cut.wav");
		expect(show.retimedFrom.file).toBe("piece.wav");
		const orphans = cues.filter(({ status }: { status: string }) => status === "orphan").length;
		expect(show.cues.length).toBe(cues.length - orphans);
	});

	it("moves nothing and writes nothing for another piece altogether", () => {
		let state = 7;
		const noise = Float32Array.from({ length: 20 * 22050 }, () => {
			state = (Math.imul(state, 1664525) + 1013904223) | 0;
			return state / 2 ** 32;
		});
		writeFileSync(path("other.wav"), writeWav([noise], 22050));
		const result = run("retime", "piece.starstave.json", "other.wav", "--out", "other.starstave.json", "--json", "-");
		const { verdict, cues } = json(result);
		expect(result.code).toBe(2);
		expect(verdict).toBe("different");
		for (const { oldTime, newTime } of cues) expect(newTime).toBe(oldTime);
		expect(readdirSync(path("."))).not.toContain("other.starstave.json");
	});

	it("wants the old soundtrack, and says where it looks for it", () => {
		const result = run("retime", "apart/piece.starstave.json", "piece.wav", "--out", "new.starstave.json");
		expect(result.code).toBe(1);
		expect(complaint(result)).toMatch(/can't be retimed without its old soundtrack; put piece\.wav beside it/);
	});
});
