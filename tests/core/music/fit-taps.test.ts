import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { createRandom } from "../../../src/core/maths/index.ts";
import { fitTaps } from "../../../src/core/music/index.ts";

/** Roughly normal, σ 1: the sum of twelve evenly spread numbers less 6. */
function normal(random: { next(): number }): number {
	let sum = -6;
	for (let k = 0; k < 12; k++) sum += random.next();
	return sum;
}

const seeds = fc.integer({ min: 1, max: 1e6 });
const intervals = fc.double({ min: 0.33, max: 0.9, noNaN: true });

describe("taps", () => {
	it("choose the level of what was heard, however unsteady the hand (25 ms) and late as a whole (40 ms)", () => {
		fc.assert(
			fc.property(seeds, intervals, fc.constantFrom(1, 2, 0.5), (seed, interval, level) => {
				const random = createRandom(seed);
				const beats = Array.from({ length: 40 }, (_, k) => 3 + k * interval);
				// At level 2 twice as many beats were heard as are tapped, at ½ half as many.
				const heard =
					level === 2
						? beats.flatMap((time) => [time, time + interval / 2])
						: level === 0.5
							? beats.filter((_, k) => k % 2 === 0)
							: beats;
				const taps = beats.slice(4, 28).map((time) => time + 0.04 + 0.025 * normal(random));
				const fit = fitTaps(taps, heard)!;
				expect(fit.level).toBe(level);
				for (const beat of fit.beats) {
					expect(Math.min(...beats.map((time) => Math.abs(time - beat)))).toBeLessThan(1e-9);
				}
				expect(fit.beats.length).toBeGreaterThanOrEqual(22);
				expect(fit.bpm).toBeCloseTo(60 / interval, -1);
			}),
		);
	});

	it("stand for themselves, smoothed, where nothing heard agrees", () => {
		fc.assert(
			fc.property(seeds, intervals, (seed, interval) => {
				const random = createRandom(seed);
				const beats = Array.from({ length: 32 }, (_, k) => 5 + k * interval);
				const heard = Array.from({ length: 60 }, (_, k) => k * interval * 0.7);
				const fit = fitTaps(
					beats.map((time) => time + 0.02 * normal(random)),
					heard,
				)!;
				expect(fit.level).toBeNull();
				expect(fit.beats).toHaveLength(32);
				const off = fit.beats.map((beat, k) => Math.abs(beat - beats[k]));
				expect(off.reduce((sum, value) => sum + value, 0) / off.length).toBeLessThan(0.02);
			}),
		);
	});

	it("leave a gap where one was missed, and leave slips out", () => {
		const beats = Array.from({ length: 20 }, (_, k) => 1 + k * 0.5);
		const taps = beats.filter((_, k) => k !== 7 && k !== 12);
		taps.push(beats[4] + 0.08);
		const fit = fitTaps(taps, [])!;
		expect(fit.beats).toHaveLength(20);
		expect(Math.max(...fit.beats.map((beat, k) => Math.abs(beat - beats[k])))).toBeLessThan(1e-6);
	});

	it("too few say nothing", () => {
		expect(fitTaps([], [1, 2, 3])).toBeNull();
		expect(fitTaps([1, 1.5, 2, 2.5, 3], [1, 2, 3])).toBeNull();
	});
});
