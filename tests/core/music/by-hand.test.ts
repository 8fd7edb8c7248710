import { describe, expect, it } from "vitest";
import { doubtfulBeats, doubtfulPlaces, nearestOnset } from "../../../src/core/music/index.ts";

describe("the onset nearest to a place", () => {
	/** Peaks 200 a second: hum, and strokes that set in at given times and die away. */
	const peaksOf = (onsets: readonly number[], hum = 0.02) => {
		const values = new Float32Array(2 * 2000);
		for (let i = 0; i < 2000; i++) {
			const level = onsets.reduce((sum, at) => sum + (i / 200 >= at ? 0.8 * Math.exp(-(i / 200 - at) / 0.05) : 0), hum);
			values[2 * i] = -level;
			values[2 * i + 1] = level;
		}
		return { values, rate: 200 };
	};

	it("is where the stroke sets in, to 5 ms", () => {
		const peaks = peaksOf([1.003, 2.5, 4.212]);
		for (const [near, is] of [
			[0.99, 1.003],
			[1.02, 1.003],
			[2.48, 2.5],
			[4.23, 4.212],
		]) {
			const found = nearestOnset(peaks, near, 0.03);
			expect(found).not.toBeNull();
			expect(Math.abs((found ?? 0) - is)).toBeLessThan(0.0051);
		}
	});

	it("is none where nothing sets in within reach, or the sound only dies away", () => {
		const peaks = peaksOf([1, 2]);
		expect(nearestOnset(peaks, 1.5, 0.03)).toBeNull();
		expect(nearestOnset(peaks, 1.06, 0.03)).toBeNull();
		expect(nearestOnset(peaksOf([]), 1, 0.03)).toBeNull();
		expect(nearestOnset({ values: new Float32Array(0), rate: 200 }, 1, 0.03)).toBeNull();
	});
});

describe("doubtful beats", () => {
	const heard = {
		beats: Float64Array.from([1, 1.5, 2, 2.5, 3]),
		beatConfidence: Float32Array.from([0.9, 0.2, 0.1, 0.2, 0.8]),
	};

	it("are those that the analysis was unsure of", () => {
		expect(doubtfulBeats({ beats: [1, 1.5, 2, 2.5, 3] }, heard)).toEqual([1, 2, 3]);
	});

	it("begin in as many places as there are stretches of them", () => {
		expect(doubtfulPlaces({ beats: [1, 1.5, 2, 2.5, 3] }, heard)).toEqual([1.5]);
		expect(doubtfulPlaces({ beats: [1, 1.5, 2.1, 2.5, 3] }, heard)).toEqual([1.5, 2.5]);
	});

	it("are none that were moved, followed, were put in, or are held", () => {
		expect(doubtfulBeats({ beats: [1, 1.5, 2.03, 2.5, 3], anchors: [2] }, heard)).toEqual([1, 3]);
		expect(doubtfulBeats({ beats: [1, 1.5, 2, 2.5, 3], anchors: [1] }, heard)).toEqual([2, 3]);
		// twice as many beats: those between were not heard and have no doubt of their own
		expect(doubtfulBeats({ beats: [1, 1.25, 1.5, 1.75, 2, 2.25, 2.5, 2.75, 3] }, heard)).toEqual([2, 4, 6]);
	});
});
