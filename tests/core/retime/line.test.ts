import { describe, expect, test } from "vitest";
import { createRandom } from "../../../src/core/maths/index.ts";
import { createPhaseMeter } from "../../../src/core/retime/lag.ts";
import { fitLines, median, type Point } from "../../../src/core/retime/line.ts";
import { makeSmallCopy } from "../../../src/core/retime/small-copy.ts";
import { makeMusic, RATE, toSamples } from "./made-music.ts";

/** Points on old = at + rate · new, each off by up to `scatter`, a share of them anywhere. */
function points(at: number, rate: number, from: number, to: number, scatter: number, wrong: number): Point[] {
	const random = createRandom(7);
	const out: Point[] = [];
	for (let time = from; time < to; time += 1) {
		const off = random.next() < wrong ? (random.next() - 0.5) * 0.5 : (random.next() - 0.5) * 2 * scatter;
		out.push({ new: time, old: at + rate * time + off, quality: 0.5 + random.next() / 2 });
	}
	return out;
}

describe("lines through points", () => {
	test("a third of wrong points doesn't move the line", () => {
		const [line, ...more] = fitLines(points(5, 1.02, 0, 100, 0.004, 0.33), 0.012, 4);
		expect(more).toHaveLength(0);
		expect(Math.abs(line.rate - 1.02)).toBeLessThan(5e-5);
		expect(Math.abs(line.at + line.rate * 50 - (5 + 1.02 * 50))).toBeLessThan(0.002);
		expect(line.inliers / line.points).toBeGreaterThan(0.6);
	});

	test("two lines one after another are told apart, a slip of 40 ms too", () => {
		const slipped = [...points(0, 1, 0, 40, 0.003, 0), ...points(0.04, 1, 40, 90, 0.003, 0)];
		const lines = fitLines(slipped, 0.012, 4);
		expect(lines).toHaveLength(2);
		expect(Math.abs(lines[1].at + lines[1].rate * 60 - (lines[0].at + lines[0].rate * 60) - 0.04)).toBeLessThan(0.004);
		expect(Math.abs(lines[0].to - 39)).toBeLessThanOrEqual(1);
	});

	test("no line is made of too few points or of chance", () => {
		expect(fitLines([], 0.01, 3)).toEqual([]);
		expect(fitLines(points(0, 1, 0, 2, 0, 0), 0.01, 3)).toEqual([]);
		expect(fitLines(points(0, 1, 0, 30, 0.2, 1), 0.002, 8)).toEqual([]);
	});

	test("the median of an even and an odd number of values", () => {
		expect(median([3, 1, 2])).toBe(2);
		expect(median([4, 1, 3, 2])).toBe(2.5);
		expect(median([])).toBeNaN();
	});
});

describe("the small copy", () => {
	test("a tone below its band keeps level and phase, one above it is gone", () => {
		for (const rate of [44100, 48000, 22050, 32000]) {
			const tone = (hertz: number) =>
				toSamples(
					Float32Array.from({ length: rate }, (_, i) => Math.sin((2 * Math.PI * hertz * i) / rate)),
					rate,
				);
			const low = makeSmallCopy(tone(1000), 11025);
			const high = makeSmallCopy(tone(9000), 11025);
			let off = 0;
			let left = 0;
			for (let i = 200; i < 10800; i++) {
				off = Math.max(off, Math.abs(low[i] - Math.sin((2 * Math.PI * 1000 * i) / 11025)));
				left = Math.max(left, Math.abs(high[i]));
			}
			expect(off, `${rate} Hz`).toBeLessThan(0.002);
			expect(left, `${rate} Hz`).toBeLessThan(0.005);
		}
	});

	test("channels are mixed, and those in opposite phase aren't lost", () => {
		const left = Float32Array.from({ length: 22050 }, (_, i) => Math.sin(i / 10));
		const right = left.map((value) => -value);
		const copy = makeSmallCopy({ ...toSamples(left), channels: [left, right] }, 11025);
		expect(Math.max(...copy)).toBeGreaterThan(0.9);
	});
});

describe("lags by phase", () => {
	test("a delay of a fraction of a sample is measured to a hundredth of a millisecond", () => {
		const work = makeSmallCopy(toSamples(makeMusic(3, 8).samples.channels[0], RATE), 11025);
		const meter = createPhaseMeter(8192);
		for (const delay of [0, 3, 17]) {
			const later = new Float32Array(work.length);
			later.set(work.subarray(0, work.length - delay), delay);
			const point = meter.measure(work, later, { at: 0, rate: 1 }, 6, 0.03);
			expect(point).not.toBeNull();
			expect(Math.abs((point as Point).old - ((point as Point).new - delay / 11025))).toBeLessThan(1e-5);
		}
	});

	test("silence and the ends of a soundtrack give no measure", () => {
		const meter = createPhaseMeter(8192);
		const silent = new Float32Array(60000);
		expect(meter.measure(silent, silent, { at: 0, rate: 1 }, 2, 0.03)).toBeNull();
		const work = makeSmallCopy(toSamples(makeMusic(3, 8).samples.channels[0], RATE), 11025);
		expect(meter.measure(work, work, { at: 0, rate: 1 }, 0.1, 0.03)).toBeNull();
	});
});
