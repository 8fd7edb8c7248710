import { describe, expect, it } from "vitest";
import { allowedLevels, beatF, bestLevelF, boundaryF, correctLevel, eventF, signedError } from "./music-metrics.ts";

// Worked by hand from the definitions (Davies, Degara and Plumbley 2009); no figure is taken from this code.
const steady = (from: number, interval: number, count: number): number[] =>
	Array.from({ length: count }, (_, i) => from + i * interval);

describe("beat metrics on worked cases", () => {
	const truth = steady(5, 0.5, 40);

	it("the truth itself scores 1 everywhere", () => {
		expect(beatF(truth, truth)).toBe(1);
		expect(correctLevel(truth, truth)).toBe(1);
		expect(allowedLevels(truth, truth)).toBe(1);
		expect(signedError(truth, truth)).toBe(0);
	});

	it("half of the beats missing: precision 1, recall ½, F ⅔; every second beat is an allowed level", () => {
		const half = truth.filter((_, i) => i % 2 === 0);
		expect(beatF(half, truth)).toBeCloseTo(2 / 3, 12);
		expect(bestLevelF(half, truth)).toBeGreaterThan(0.98);
		expect(correctLevel(half, truth)).toBe(0);
		expect(allowedLevels(half, truth)).toBe(1);
	});

	it("twice the beats: precision ½, recall 1, F ⅔ but for the one beat that has no successor to halve", () => {
		const twice = steady(5, 0.25, 79);
		expect(beatF(twice, truth)).toBeCloseTo(80 / 119, 12);
		expect(bestLevelF(twice, truth)).toBe(1);
		expect(allowedLevels(twice, truth)).toBe(1);
	});

	it("off-beats: F 0, allowed level 1 but for the last, which lies past the truth", () => {
		const off = truth.map((time) => time + 0.25);
		expect(beatF(off, truth)).toBe(0);
		expect(allowedLevels(off, truth)).toBeCloseTo(39 / 40, 12);
	});

	it("60 ms late is right, 80 ms late is wrong, and the signed error says late", () => {
		expect(
			beatF(
				truth.map((time) => time + 0.06),
				truth,
			),
		).toBe(1);
		expect(
			beatF(
				truth.map((time) => time + 0.08),
				truth,
			),
		).toBe(0);
		expect(
			signedError(
				truth.map((time) => time + 0.06),
				truth,
			),
		).toBeCloseTo(0.06, 9);
	});

	it("two estimates near one beat count once", () => {
		expect(eventF([1, 1.01], [1], 0.07)).toBeCloseTo(2 / 3, 12);
	});

	it("a slip of phase halfway costs its beat in continuity, and everything after at another phase", () => {
		const slipped = truth.map((time, i) => (i < 20 ? time : time + 0.25));
		expect(correctLevel(slipped, truth)).toBeCloseTo(20 / 40, 12);
	});

	it("what lies before 5 s is left out", () => {
		expect(beatF([1, 2, 3, ...truth], truth)).toBe(1);
	});

	it("boundaries: one of two found within 3 s, none within half a second", () => {
		expect(boundaryF([10, 99], [12, 50], 3)).toBeCloseTo(0.5, 12);
		expect(boundaryF([10, 99], [12, 50], 0.5)).toBe(0);
	});
});
