import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { createBeatMap, cueTimes } from "../../../src/core/show/index.ts";

/** Four beats at 120, then four at 60 a minute; a bar of 3, one of 4, then 2. A pickup of one beat. */
const grid = {
	beats: [1, 1.5, 2, 2.5, 3, 4, 5, 6, 7],
	bars: [
		{ beat: 1, beatsPerBar: 3 },
		{ beat: 4, beatsPerBar: 4 },
		{ beat: 8, beatsPerBar: 2 },
	],
};

describe("beat grid", () => {
	const map = createBeatMap(grid);

	it("runs evenly between two beats and changes tempo on the beat", () => {
		expect(map.secondsAt(0)).toBe(1);
		expect(map.secondsAt(0.5)).toBe(1.25);
		expect(map.secondsAt(4)).toBe(3);
		expect(map.secondsAt(4.25)).toBe(3.25);
		expect(map.positionAt(2.75)).toBe(3.5);
		expect(map.positionAt(3.5)).toBe(4.5);
	});

	it("goes on at its end intervals before the first beat and past the last", () => {
		expect(map.secondsAt(-3)).toBe(-0.5);
		expect(map.positionAt(-0.5)).toBe(-3);
		expect(map.secondsAt(10.5)).toBe(9.5);
		expect(map.positionAt(9.5)).toBe(10.5);
	});

	it("counts 120 beats a minute in fours where there is no beat, and from a single one", () => {
		const none = createBeatMap({ beats: [], bars: [] });
		expect(none.secondsAt(7)).toBe(3.5);
		expect(none.positionAt(-1)).toBe(-2);
		expect(none.barAt(9)).toEqual({ bar: 3, beat: 2 });
		expect(none.positionOf(3, 2)).toBe(9);
		const one = createBeatMap({ beats: [10], bars: [] });
		expect(one.secondsAt(4)).toBe(12);
		expect(one.positionAt(9)).toBe(-2);
	});

	it("counts bars and beats from 1, backwards before the first bar and on past the last", () => {
		expect(map.barAt(1)).toEqual({ bar: 1, beat: 1 });
		expect(map.barAt(3.5)).toEqual({ bar: 1, beat: 3.5 });
		expect(map.barAt(4)).toEqual({ bar: 2, beat: 1 });
		expect(map.barAt(8)).toEqual({ bar: 3, beat: 1 });
		expect(map.barAt(11)).toEqual({ bar: 4, beat: 2 });
		// The pickup is the last beat of bar 0, which has the metre of bar 1.
		expect(map.barAt(0)).toEqual({ bar: 0, beat: 3 });
		expect(map.barAt(-2)).toEqual({ bar: 0, beat: 1 });
		expect(map.barAt(-3)).toEqual({ bar: -1, beat: 3 });
		expect(map.beatsPerBarAt(2)).toBe(3);
		expect(map.beatsPerBarAt(5)).toBe(4);
		expect(map.beatsPerBarAt(100)).toBe(2);
	});

	it("answers positionOf with the place that barAt names", () => {
		for (let position = -9; position < 20; position += 0.25) {
			const { bar, beat } = map.barAt(position);
			expect(map.positionOf(bar, beat)).toBeCloseTo(position, 12);
		}
	});

	it("brings every position back from its seconds, on any grid", () => {
		const intervals = fc.array(fc.double({ min: 0.2, max: 2, noNaN: true }), { minLength: 1, maxLength: 40 });
		fc.assert(
			fc.property(intervals, fc.double({ min: -30, max: 70, noNaN: true }), (steps, position) => {
				const beats = [3];
				for (const step of steps) beats.push(beats[beats.length - 1] + step);
				const any = createBeatMap({ beats, bars: [] });
				expect(any.positionAt(any.secondsAt(position))).toBeCloseTo(position, 9);
				expect(any.secondsAt(position + 0.01)).toBeGreaterThan(any.secondsAt(position));
			}),
		);
	});

	it("times a cue by its beats, and a pinned one by its seconds with its length from there", () => {
		expect(cueTimes({ at: 3, length: 2 }, map)).toEqual({ start: 2.5, end: 4 });
		expect(cueTimes({ at: 3, length: 2, pinned: 5 }, map)).toEqual({ start: 5, end: 7 });
		expect(cueTimes({ at: 3, length: 0, pinned: 5.123 }, map)).toEqual({ start: 5.123, end: 5.123 });
	});
});
