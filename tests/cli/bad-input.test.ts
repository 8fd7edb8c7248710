import { mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from "node:fs";
import { beforeAll, describe, expect, it } from "vitest";
import { type SampleFile, sampleText } from "../core/show/sample-show.ts";
import { makeTrack, writeWav } from "./make-track.ts";
import { buildStarstave, complaint } from "./run-starstave.ts";

const { run, path, folder } = buildStarstave();

const put = (name: string, bytes: Uint8Array | string): void => writeFileSync(path(name), bytes);
/** The sample without its soundtrack, so that nothing has to be heard before the show is looked at. */
const show = (change: (file: SampleFile & Record<string, unknown>) => void): string =>
	sampleText((file) => {
		Object.assign(file, { soundtrack: null });
		change(file);
	});

/** Refused with exit status 1 and one line that names the command; nothing of what was there is touched. */
function refusal(...words: readonly string[]): string {
	const before = listing();
	const result = run(...words);
	expect(result.stdout).toBe("");
	expect(result.code).toBe(1);
	const line = complaint(result);
	expect(line).toMatch(new RegExp(`^starstave( ${words[0]})?: .*\\.$`));
	expect(listing()).toEqual(before);
	return line.replace(/^starstave( \w+)?: /, "");
}

function listing(): string[] {
	return readdirSync(folder).map((name) => `${name} ${statSync(path(name)).size}`);
}

describe("a soundtrack that can't be used says why", () => {
	beforeAll(() => {
		put("good.wav", makeTrack({ seconds: 6 }));
		put("words.mp3", "these are words, not music\n".repeat(40));
		put("empty.wav", "");
		put("song.m4a", readFileSync(new URL("../core/decode/fixtures/pulses.m4a", import.meta.url)));
		put("cut.mp3", Uint8Array.from([0x49, 0x44, 0x33, 4, 0, 0, 0, 0, 0, 0, 0xff, 0xfb, 0x90, 0x64, 0, 0]));
	});

	it.each([
		["not audio", "words.mp3", /^words\.mp3 is not audio that can be read: .*WAV, MP3/],
		["empty", "empty.wav", /^empty\.wav is empty: /],
		["an MP3 that ends within its first frame", "cut.mp3", /cut\.mp3/],
		["AAC, which only a browser decodes", "song.m4a", /^song\.m4a .*AAC.*browser/],
		["missing", "nowhere.wav", /^nowhere\.wav can't be read: there is no such file or folder\.$/],
		["a folder", ".", /^\. can't be read: it is a folder\.$/],
	])("%s", (_name, file, sentence) => {
		expect(refusal("analyse", file)).toMatch(sentence);
		expect(refusal("draft", file, "--drones", "5", "--out", "made.starstave.json")).toMatch(sentence);
	});

	it("takes one second of silence and says that there is no beat in it", () => {
		put("silence.wav", writeWav([new Float32Array(22050)], 22050));
		const result = run("analyse", "silence.wav", "--json", "-");
		expect(result.code).toBe(0);
		const heard = JSON.parse(result.stdout);
		expect(heard.beats).toEqual([]);
		expect(heard.confidence).toBe(0);
		// Nothing passes the absolute gate of BS.1770.
		expect(heard.loudness.integrated).toBeLessThan(-70);
		expect(heard.notes.join(" ")).toMatch(/beat|silent/);
	});

	it("takes an MP3 that was cut off, and says so", () => {
		const fixture = new URL("../core/decode/fixtures/pulses.mp3", import.meta.url);
		const whole = readFileSync(fixture);
		put("half.mp3", whole.subarray(0, Math.floor(whole.length / 2)));
		const result = run("analyse", "half.mp3", "--json", "-");
		expect(result.code).toBe(0);
		const heard = JSON.parse(result.stdout);
		expect(heard.soundtrack.duration).toBeGreaterThan(0.5);
		expect(heard.notes.join(" ")).toMatch(/cut off|ends|truncated|shorter/);
	});

	it("takes ten minutes of noise, and is not sure of any beat in it", () => {
		let state = 1;
		const noise = Float32Array.from({ length: 600 * 8000 }, () => {
			state = (Math.imul(state, 1664525) + 1013904223) | 0;
			return state / 2 ** 32;
		});
		put("noise.wav", writeWav([noise], 8000));
		const result = run("analyse", "noise.wav", "--json", "-");
		expect(result.code).toBe(0);
		const heard = JSON.parse(result.stdout);
		expect(heard.soundtrack.duration).toBe(600);
		expect(heard.confidence).toBeLessThan(0.5);
	});

	it("takes 8 kHz mono and six channels, and says so", () => {
		const tone = Float32Array.from({ length: 16000 }, (_, i) => 0.3 * Math.sin(i / 3));
		put("low.wav", writeWav([tone], 8000));
		put("six.wav", writeWav([tone, tone, tone, tone, tone, tone], 44100));
		const low = JSON.parse(run("analyse", "low.wav", "--json", "-").stdout);
		expect(low.soundtrack).toMatchObject({ sampleRate: 8000, channels: 1 });
		expect(low.notes.join(" ")).toMatch(/8 kHz|8000 Hz/);
		const six = JSON.parse(run("analyse", "six.wav", "--json", "-").stdout);
		expect(six.soundtrack.channels).toBe(6);
		expect(six.notes.join(" ")).toMatch(/six channels/i);
	});
});

describe("a show that can't be used says what, where and what would be right", () => {
	const cases: readonly [string, string, RegExp][] = [
		[
			"NaN",
			show(() => {}).replace('"at":32,', '"at":NaN,'),
			/^s\.json: Cue 12\.5 \(id c4\): at is NaN, but must be a finite number\.$/,
		],
		[
			"duplicate ids",
			show((file) => {
				file.cues[4].id = "c2";
			}),
			/^s\.json: Cue 5 of the list has the id c2 that cue 2 has; /,
		],
		[
			"an unknown formation",
			show((file) => {
				Object.assign(file.cues[2], { formation: "f9" });
			}),
			/^s\.json: Cue 12 \(id c3\) goes to formation f9, but the show has only f1, f2\.$/,
		],
		[
			"version 2",
			show((file) => {
				file.version = 2;
			}),
			/^s\.json: The show was saved by a newer program: its version is 2/,
		],
		[
			"zero drones",
			show((file) => {
				file.fleet.count = 0;
				file.groups = [];
			}),
			/drones/,
		],
		[
			"more slots than drones",
			show((file) => {
				file.fleet.count = 7;
				file.groups = [];
			}),
			/Formation Ring has 12 slots, but the fleet has 7 drones/,
		],
		[
			"no opening",
			show((file) => {
				Object.assign(file, { opening: null });
			}),
			/opening/,
		],
		["cut off", show(() => {}).slice(0, 700), /^s\.json: The show file is not /],
		["another JSON", '{"hello": "world"}', /^s\.json: The file holds no show: format is missing/],
		["empty", "", /^s\.json: The show file is empty/],
	];
	it.each(cases)("%s", (_name, text, sentence) => {
		put("s.json", text);
		expect(refusal("check", "s.json")).toMatch(sentence);
		expect(refusal("handoff", "s.json", "--out", "crew")).toMatch(sentence);
	});

	it("bytes that are no text, and a zip that is no show", () => {
		put("s.json", Uint8Array.from([0xff, 0xfe, 0x00, 0x41]));
		expect(refusal("check", "s.json")).toMatch(/not UTF-8 text/);
		put("s.json", Uint8Array.from([0x50, 0x4b, 3, 4, 0, 0, 0]));
		expect(refusal("check", "s.json")).toMatch(/no whole zip/);
	});

	it("never writes over a show that a newer program saved, not even by force", () => {
		put(
			"newer.json",
			show((file) => {
				file.version = 2;
			}),
		);
		const words = ["draft", "good.wav", "--drones", "5", "--out", "newer.json", "--force"];
		expect(refusal(...words)).toMatch(/^newer\.json was saved by a newer program and is never written over/);
	});

	it("a soundtrack that is not the show's own", () => {
		put("s.json", sampleText());
		put("good.wav", makeTrack({ seconds: 6 }));
		expect(refusal("check", "s.json", "--soundtrack", "good.wav")).toMatch(
			/^good\.wav is not the soundtrack that s\.json was cut to \(harbour\.wav/,
		);
	});
});

describe("wrong use says what would be right", () => {
	beforeAll(() => {
		put("good.wav", makeTrack({ seconds: 6 }));
		put("standing.json", "{}");
		mkdirSync(path("full"), { recursive: true });
		writeFileSync(path("full/notes.txt"), "mine");
	});
	const draft = (...more: readonly string[]): string => refusal("draft", "good.wav", ...more);

	it.each([
		[["dance"], /^"dance" is no command; choose analyse, draft, check, retime, handoff, or --help\.$/],
		[["analyse"], /^TRACK is missing; write starstave analyse TRACK/],
		[["analyse", "a", "b"], /^"b" is one word too many/],
		[["analyse", "good.wav", "--loud"], /^--loud is no flag of analyse; it takes --json\.$/],
		[["analyse", "good.wav", "--json"], /^--json is given without a value; write --json FILE\|-\.$/],
		[["analyse", "good.wav", "--json", "no/such/place.json"], /there is no folder no\/such; make it first\.$/],
		[
			["handoff", "s.json", "--out", "crew", "--rate", "0"],
			/^--rate is 0, but must be a whole number from 1 to 100\.$/,
		],
		[["handoff", "s.json", "--out", "crew", "--timecode", "31"], /^--timecode is 31, but must be one of 24, 25/],
		[["handoff", "s.json", "--out", "crew", "--timecode-start", "1h"], /^The timecode "1h" can't be/],
	])("%j", (words, sentence) => {
		expect(refusal(...words)).toMatch(sentence);
	});

	it("zero drones, half a drone, no drones given", () => {
		expect(draft("--drones", "0", "--out", "x.json")).toBe(
			"--drones is 0, but must be a whole number from 1 to 20000.",
		);
		expect(draft("--drones", "2.5", "--out", "x.json")).toMatch(/must be a whole number/);
		expect(draft("--drones", "many", "--out", "x.json")).toMatch(/^--drones is many, but must be/);
		expect(draft("--out", "x.json")).toMatch(/^--drones is missing; write starstave draft TRACK --drones N --out SHOW/);
	});

	it("nothing is overwritten without --force, and hand-off wants an empty folder", () => {
		expect(draft("--drones", "5", "--out", "standing.json")).toBe(
			"standing.json exists; add --force to replace it, or name another file.",
		);
		put("s.json", sampleText());
		expect(refusal("handoff", "s.json", "--out", "full")).toBe("full is not empty; name an empty or new folder.");
		expect(readFileSync(path("full/notes.txt"), "utf8")).toBe("mine");
	});
});
