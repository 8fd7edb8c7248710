import { describe, expect, it } from "vitest";
import { measureLoudness } from "../../../src/core/music/index.ts";

// EBU Tech 3341 (version 3, 2016), "Loudness metering: EBU mode", table 1, minimum requirement test signals 1 to 5 and
// 9 (stereo 1 kHz sines at stated peak levels), and its accepted answers of ±0.1 LU. Signals are made here as described.
const TOLERANCE = 0.1;

/** Stereo 1 kHz sine; each part [seconds, peak level in dBFS]. */
function tone(parts: readonly (readonly [number, number])[], rate = 48_000): Float32Array[] {
	const length = parts.reduce((sum, [seconds]) => sum + Math.round(seconds * rate), 0);
	const channel = new Float32Array(length);
	let at = 0;
	for (const [seconds, level] of parts) {
		const peak = 10 ** (level / 20);
		for (let k = Math.round(seconds * rate); k > 0; k--, at++) {
			channel[at] = peak * Math.sin((2 * Math.PI * 1000 * at) / rate);
		}
	}
	return [channel, channel];
}

const near = (value: number, expected: number): void => {
	expect(Math.abs(value - expected)).toBeLessThanOrEqual(TOLERANCE);
};

describe("loudness against the signals of EBU Tech 3341", () => {
	it.each([
		[1, [[20, -23]], -23],
		[2, [[20, -33]], -33],
		[
			3,
			[
				[10, -36],
				[60, -23],
				[10, -36],
			],
			-23,
		], // prettier-ignore
		[
			4,
			[
				[10, -72],
				[10, -36],
				[60, -23],
				[10, -36],
				[10, -72],
			],
			-23,
		],
		[
			5,
			[
				[20, -26],
				[20.1, -20],
				[20, -26],
			],
			-23,
		],
	] as [number, [number, number][], number][])("signal %i: integrated", (_, parts, expected) => {
		near(measureLoudness(tone(parts), 48_000).integrated, expected);
	});

	it.each([8000, 22_050, 44_100, 96_000])("signals 1 and 2 at %i Hz too: the filters are made for the rate", (rate) => {
		const one = measureLoudness(tone([[20, -23]], rate), rate);
		near(one.integrated, -23);
		near(one.momentary[100], -23);
		near(one.shortTerm[100], -23);
		near(measureLoudness(tone([[20, -33]], rate), rate).integrated, -33);
	});

	it("signal 9: short-term loudness of 1.34 s at −20 and 1.66 s at −30, repeated, is −23 after 3 s", () => {
		const parts = Array.from(
			{ length: 5 },
			() =>
				[
					[1.34, -20],
					[1.66, -30],
				] as [number, number][],
		).flat(); // prettier-ignore
		const { shortTerm } = measureLoudness(tone(parts), 48_000);
		for (let i = 29; i < shortTerm.length; i++) near(shortTerm[i], -23);
	});

	it("signal 12: momentary loudness of 0.18 s at −20 and 0.22 s at −30, repeated, is −23 after 1 s", () => {
		const parts = Array.from(
			{ length: 25 },
			() =>
				[
					[0.18, -20],
					[0.22, -30],
				] as [number, number][],
		).flat();
		const { momentary } = measureLoudness(tone(parts), 48_000);
		for (let i = 10; i < momentary.length; i++) near(momentary[i], -23);
	});

	it("signal 6: 5.0 channels at −28, −24, −30 dBFS (left and right, centre, surrounds) make −23", () => {
		const rate = 48_000;
		const sine = (level: number) => tone([[20, level]], rate)[0];
		near(measureLoudness([sine(-28), sine(-28), sine(-24), sine(-30), sine(-30)], rate).integrated, -23);
	});
});

describe("at the edges", () => {
	it("silence is −120 LUFS, not minus infinity", () => {
		const { integrated, momentary } = measureLoudness([new Float32Array(48_000)], 48_000);
		expect(integrated).toBe(-120);
		expect(momentary.every((x) => x === -120)).toBe(true);
	});

	it("less than a tenth of a second has no blocks", () => {
		expect(measureLoudness([new Float32Array(100)], 48_000).momentary).toHaveLength(0);
	});
});
