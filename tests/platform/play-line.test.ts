import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { clicksBetween, type PlayLine, positionOn } from "../../src/platform/play-line.ts";

const lines = fc.record({
	when: fc.double({ min: 0, max: 100, noNaN: true }),
	position: fc.double({ min: -30, max: 100, noNaN: true }),
	rate: fc.constantFrom(0.5 as const, 0.75 as const, 1 as const),
	loop: fc.option(
		fc.record({
			from: fc.double({ min: 0, max: 50, noNaN: true }),
			length: fc.double({ min: 0.5, max: 20, noNaN: true }),
		}),
	),
});

function toLine({ when, position, rate, loop }: typeof lines extends fc.Arbitrary<infer T> ? T : never): PlayLine {
	if (loop === null) return { when, position, rate, loop: null };
	const to = loop.from + loop.length;
	// As the player starts it: never past the loop's end.
	return { when, position: Math.min(position, to - 0.25), rate, loop: { from: loop.from, to } };
}

describe("a line of playing", () => {
	it("stands where it will begin until its instant has come, then runs at its rate", () => {
		const line: PlayLine = { when: 10, position: 4, rate: 0.5, loop: null };
		expect(positionOn(line, 9)).toBe(4);
		expect(positionOn(line, 10)).toBe(4);
		expect(positionOn(line, 14)).toBe(6);
	});

	it("jumps from the loop's end to its start", () => {
		const line: PlayLine = { when: 0, position: 1, rate: 1, loop: { from: 2, to: 5 } };
		expect(positionOn(line, 3.5)).toBe(4.5);
		expect(positionOn(line, 4)).toBe(2);
		expect(positionOn(line, 11.25)).toBe(3.25);
	});

	it("clicks where the music stands on a beat, each beat once a round, however the time is cut up", () => {
		fc.assert(
			fc.property(lines, fc.double({ min: 0.1, max: 3, noNaN: true }), (written, step) => {
				const line = toLine(written);
				const beats = Array.from({ length: 120 }, (_, i) => 0.31 + i * 0.47);
				const track = { beats, barStarts: new Set([0, 4, 8]) };
				const clicks = [];
				for (let cut = 0; cut < 12; cut++) {
					const from = line.when + cut * step;
					clicks.push(...clicksBetween(line, track, from, from + step));
				}
				const end = line.when + 12 * step;
				for (const { time, isBarStart } of clicks) {
					const position = positionOn(line, time + 1e-9);
					const beat = beats.findIndex((one) => Math.abs(one - position) < 1e-6);
					expect(beat).toBeGreaterThanOrEqual(0);
					expect(isBarStart).toBe(track.barStarts.has(beat));
				}
				// By brute force: walk the music in small steps and count the beats that are passed.
				let passed = 0;
				const walk = 0.01;
				const steps = Math.floor((end - line.when) / walk);
				for (let i = 0; i < steps; i++) {
					const a = positionOn(line, line.when + i * walk);
					const b = positionOn(line, line.when + (i + 1) * walk);
					const spans =
						b >= a
							? [[a, b]]
							: [
									[a, line.loop!.to],
									[line.loop!.from, b],
								];
					for (const [low, high] of spans) passed += beats.filter((beat) => beat >= low && beat < high).length;
				}
				expect(Math.abs(passed - clicks.length)).toBeLessThanOrEqual(1);
			}),
			{ numRuns: 60 },
		);
	});

	it("clicks nowhere before the music and past its last beat", () => {
		const track = { beats: [1, 2], barStarts: new Set([0]) };
		expect(clicksBetween({ when: 0, position: -5, rate: 1, loop: null }, track, 0, 5.9)).toEqual([]);
		expect(clicksBetween({ when: 0, position: -5, rate: 1, loop: null }, track, 0, 50)).toEqual([
			{ time: 6, isBarStart: true },
			{ time: 7, isBarStart: false },
		]);
	});
});
