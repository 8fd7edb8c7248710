import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { createBeatMap } from "../../src/core/show/index.ts";
import { readPlace, sayBeats, sayPlace, sayTime, writePlace } from "../../src/ui/say-place.ts";

/** Eight bars of four, then of three. */
const bars = [
	...Array.from({ length: 8 }, (_, i) => ({ beat: 4 * i, beatsPerBar: 4 })),
	...Array.from({ length: 8 }, (_, i) => ({ beat: 32 + 3 * i, beatsPerBar: 3 })),
];
const beatMap = createBeatMap({ beats: Array.from({ length: 57 }, (_, i) => i * 0.5), bars });

describe("places in the music", () => {
	it("are said as people say them, both counted from 1", () => {
		expect(sayPlace(0, beatMap)).toBe("bar 1, beat 1");
		expect(sayPlace(35, beatMap)).toBe("bar 10, beat 1");
		expect(sayPlace(33.5, beatMap)).toBe("bar 9, beat 2.5");
		expect(sayPlace(31.9999999, beatMap)).toBe("bar 9, beat 1");
	});

	it("are written so that they can be read back, before the first bar and past the last too", () => {
		fc.assert(
			fc.property(fc.integer({ min: -400, max: 900 }), (tenths) => {
				const position = tenths / 10;
				expect(readPlace(writePlace(position, beatMap), beatMap)).toBeCloseTo(position, 3);
			}),
		);
	});

	it("read a bar alone as its first beat, and refuse what is no place", () => {
		expect(readPlace("9", beatMap)).toBe(32);
		expect(readPlace(" 9.2 + .5 ", beatMap)).toBe(33.5);
		for (const text of ["", "nine", "9.", "9,2", "1.2.3"]) expect(readPlace(text, beatMap)).toBeNull();
	});
});

describe("times and lengths", () => {
	it("carry minutes, and a minus before the music", () => {
		expect(sayTime(62.4184)).toBe("1:02.418");
		expect(sayTime(59.9996)).toBe("1:00.000");
		expect(sayTime(-3.25)).toBe("−0:03.250");
	});

	it("say one beat in the singular and never 0 for what is short", () => {
		expect(sayBeats(1)).toBe("1 beat");
		expect(sayBeats(2.64)).toBe("2.6 beats");
		expect(sayBeats(0.01)).toBe("<0.1 beats");
	});
});
