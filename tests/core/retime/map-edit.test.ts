import { beforeAll, describe, expect, test } from "vitest";
import type { Samples } from "../../../src/core/decode/index.ts";
import { resample } from "../../../src/core/maths/index.ts";
import { type EditMap, isCarried, mapEdit, placesOf } from "../../../src/core/retime/index.ts";
import { cutOut, type Made, makeMusic, RATE, remaster, splice, stretchTime, toSamples } from "./made-music.ts";

/** Truth of an edit: old from, old to, new from, new to, seconds. */
type Kept = readonly [old0: number, old1: number, new0: number, new1: number];

let song: Made;
let other: Made;
let end: number;

beforeAll(() => {
	song = makeMusic(1, 24);
	other = makeMusic(99, 16, 0.47);
	end = song.samples.channels[0].length / RATE;
});

/** Every beat that is kept lies within `tolerance` seconds of a true place, every other is nowhere; edges within 50 ms. */
function holdToTruth(map: EditMap, kept: readonly Kept[], tolerance: number): void {
	for (const beat of song.beats) {
		const truth = kept
			.filter(([old0, old1]) => beat >= old0 - 1e-6 && beat < old1 - 1e-6)
			.map(([old0, old1, new0, new1]) => new0 + ((beat - old0) * (new1 - new0)) / (old1 - old0));
		const found = placesOf(map, beat).map(({ time }) => time);
		expect(found.length, `beat at ${beat} s`).toBe(truth.length);
		truth.forEach((time, i) => {
			expect(Math.abs(found[i] - time), `beat at ${beat} s`).toBeLessThanOrEqual(tolerance);
		});
	}
	const carried = map.stretches.filter(isCarried);
	expect(carried.length).toBe(kept.length);
	carried.forEach((stretch, i) => {
		const found = [...stretch.old, ...stretch.new];
		found.forEach((edge, k) => {
			expect(Math.abs(edge - kept[i][k])).toBeLessThanOrEqual(0.05);
		});
	});
}

const mapOf = (samples: Samples): EditMap =>
	mapEdit(song.samples, samples, { beats: song.beats, downbeats: song.downbeats });
const old = (from: number, to: number): Float32Array => cutOut(song.samples, from, to);
/** A sample and the rounding of a sum of seconds. */
const TO_THE_SAMPLE = 0.51 / RATE;

describe("where the samples are the same", () => {
	test("the same soundtrack is the identity", () => {
		const map = mapOf(song.samples);
		expect(map.verdict).toBe("same");
		expect(map.stretches).toHaveLength(1);
		for (const beat of song.beats) expect(placesOf(map, beat)[0].time).toBe(beat);
	});

	test("one sample that differs changes the verdict and moves nothing", () => {
		const signal = song.samples.channels[0].slice();
		signal[RATE] += 0.01;
		const map = mapOf(toSamples(signal));
		expect(map.verdict).toBe("edited");
		for (const beat of song.beats) expect(placesOf(map, beat)[0].time).toBe(beat);
	});

	test("a cut is found to the sample, on both sides of the joint", () => {
		const map = mapOf(toSamples(splice([old(0, 20), old(32, end)])));
		holdToTruth(
			map,
			[
				[0, 20, 0, 20],
				[32, end, 20, end - 12],
			],
			TO_THE_SAMPLE,
		);
		expect(map.stretches.map(({ kind }) => kind)).toEqual(["kept", "cut", "kept"]);
		expect(map.stretches.every(({ kind, exact }) => kind === "cut" || exact)).toBe(true);
		expect(Math.abs(map.joints[0].at - 20)).toBeLessThanOrEqual(TO_THE_SAMPLE);
	});

	test("a hard cut off the beat, without any fade, is found to the sample", () => {
		const map = mapOf(toSamples(splice([old(0, 21.3), old(27.77, end)], 0)));
		expect(Math.abs(map.joints[0].at - Math.round(21.3 * RATE) / RATE)).toBeLessThanOrEqual(0.001);
	});

	test("a chorus that comes twice has two places", () => {
		const map = mapOf(toSamples(splice([old(0, 32), old(16, end)])));
		holdToTruth(
			map,
			[
				[0, 32, 0, 32],
				[16, end, 32, end + 16],
			],
			TO_THE_SAMPLE,
		);
	});

	test("music put in is new, and what follows is later to the sample", () => {
		const map = mapOf(toSamples(splice([old(0, 26), cutOut(other.samples, 3, 12), old(26, end)])));
		holdToTruth(
			map,
			[
				[0, 26, 0, 26],
				[26, end, 35, end + 9],
			],
			TO_THE_SAMPLE,
		);
		expect(map.stretches.map(({ kind }) => kind)).toEqual(["kept", "inserted", "kept"]);
	});

	test("a new intro shifts everything; a trim takes both ends off", () => {
		const intro = mapOf(toSamples(splice([cutOut(other.samples, 2, 9.5), old(0, end)])));
		holdToTruth(intro, [[0, end, 7.5, end + 7.5]], TO_THE_SAMPLE);
		const trim = mapOf(toSamples(old(5.123, end - 7.4)));
		holdToTruth(trim, [[Math.round(5.123 * RATE) / RATE, end - 7.4, 0, end - 12.523]], TO_THE_SAMPLE);
		expect(trim.stretches.map(({ kind }) => kind)).toEqual(["cut", "kept", "cut"]);
	});

	test("pieces in another order are all found", () => {
		const map = mapOf(toSamples(splice([old(26, 38), old(8, 20), old(38, end)])));
		holdToTruth(
			map,
			[
				[26, 38, 0, 12],
				[8, 20, 12, 24],
				[38, end, 24, end - 14],
			],
			TO_THE_SAMPLE,
		);
	});

	test("a voice laid over the music moves nothing", () => {
		const signal = song.samples.channels[0].slice();
		const voice = cutOut(other.samples, 4, 12);
		for (let i = 0; i < voice.length; i++) signal[20 * RATE + i] += 0.6 * voice[i];
		holdToTruth(mapOf(toSamples(signal)), [[0, end, 0, end]], TO_THE_SAMPLE);
	});
});

describe("where the sound was worked on", () => {
	test("a new master with a cut stays within 5 ms", () => {
		const map = mapOf(toSamples(remaster(splice([old(0, 20), old(32, end)]))));
		holdToTruth(
			map,
			[
				[0, 20, 0, 20],
				[32, end, 20, end - 12],
			],
			0.005,
		);
		expect(map.stretches.filter(isCarried).every(({ kind, exact }) => kind === "kept" && !exact)).toBe(true);
	});

	test("another sample rate stays within a tenth of a millisecond", () => {
		const map = mapOf(toSamples(resample(song.samples.channels[0], RATE, 24000), 24000));
		holdToTruth(map, [[0, end, 0, end]], 0.0001);
	});

	test("noise and a fade at the end stay within 5 ms", () => {
		const signal = old(0, end - 6);
		let state = 1;
		for (let i = 0; i < signal.length; i++) {
			state = (Math.imul(state, 1664525) + 1013904223) | 0;
			const fade = Math.min(1, (signal.length - i) / (5 * RATE));
			signal[i] = 0.5 * fade * signal[i] + (0.004 * state) / 2 ** 31;
		}
		holdToTruth(mapOf(toSamples(signal)), [[0, end - 6, 0, end - 6]], 0.005);
	});

	test("played 2 per cent faster, pitch and all, stays within 1 ms", () => {
		// The same samples read as if they were 102 where there were 100.
		const map = mapOf(toSamples(resample(song.samples.channels[0], 102, 100)));
		holdToTruth(map, [[0, end, 0, end / 1.02]], 0.001);
		const [stretch] = map.stretches;
		expect(stretch.kind).toBe("stretched");
		expect(stretch.rate).toBeCloseTo(1.02, 5);
	});

	test.each([0.94, 1.05])("a tempo changed by overlap-add (factor %f) stays within 15 ms", (factor) => {
		const map = mapOf(toSamples(stretchTime(song.samples.channels[0], factor)));
		holdToTruth(map, [[0, end, 0, end * factor]], 0.015);
		// Overlap-add drifts by up to its search range; over a minute that is a few parts in ten thousand.
		expect(map.stretches.filter(isCarried)[0].rate).toBeCloseTo(1 / factor, 3);
	});

	test("a new intro, a cut, a stretch and a new master at once stay within 15 ms", () => {
		const factor = 0.98;
		const edit = splice([cutOut(other.samples, 1, 6), old(0, 24), old(36, end)]);
		const map = mapOf(toSamples(remaster(stretchTime(edit, factor))));
		holdToTruth(
			map,
			[
				[0, 24, 5 * factor, 29 * factor],
				[36, end, 29 * factor, (end - 7) * factor],
			],
			0.015,
		);
	});
});

describe("what can't be carried", () => {
	test("another piece altogether: says so and carries nothing", () => {
		const map = mapOf(other.samples);
		expect(map.verdict).toBe("different");
		expect(map.stretches.some(isCarried)).toBe(false);
		expect(map.notes[0]).toMatch(/another piece/);
	});

	test("silence, a click and nothing at all are answered, not thrown at", () => {
		expect(mapOf(toSamples(new Float32Array(5 * RATE))).verdict).toBe("different");
		expect(mapOf(toSamples(new Float32Array(0))).verdict).toBe("different");
		expect(mapOf(toSamples(Float32Array.of(0.5, -0.5, 0.1))).verdict).toBe("different");
		expect(mapEdit(toSamples(new Float32Array(0)), toSamples(new Float32Array(0))).verdict).toBe("different");
	});
});

describe("the designer overrules", () => {
	test("a pair set by hand is gone through", () => {
		// Found alone, old 10 s is at 10 s; the designer says that it is at 12 s.
		const map = mapEdit(song.samples, remasterAll(), { anchors: [{ old: 10, new: 12 }] });
		const through = map.stretches.find((stretch) => isCarried(stretch) && stretch.new[0] <= 12 && stretch.new[1] > 12);
		expect(through).toBeDefined();
		const place = placesOf(map, 10).map(({ time }) => time);
		expect(place.some((time) => Math.abs(time - 12) <= 0.12)).toBe(true);
	});

	test("a pair that says what is so changes nothing", () => {
		const edit = toSamples(splice([old(0, 20), old(32, end)]));
		const found = mapOf(edit);
		const set = mapEdit(song.samples, edit, {
			anchors: [{ old: 40, new: 28.02 }],
			beats: song.beats,
			downbeats: song.downbeats,
		});
		expect(set.stretches).toEqual(found.stretches);
	});

	const remasterAll = (): Samples => toSamples(remaster(song.samples.channels[0]));
});

test("progress rises to 1 and names what is done", () => {
	const shares: number[] = [];
	const stages = new Set<string>();
	mapEdit(song.samples, toSamples(old(0, 30)), {
		onProgress: (share, stage) => {
			shares.push(share);
			stages.add(stage);
		},
	});
	expect([...shares].sort((a, b) => a - b)).toEqual(shares);
	expect(shares[shares.length - 1]).toBe(1);
	expect(stages.size).toBeGreaterThan(4);
});
