import { describe, expect, it } from "vitest";
import { createBeatMap } from "../../src/core/show/index.ts";
import { peaksOnBeats } from "../../src/staves/waveform.ts";

describe("the waveform on beats", () => {
	it("puts a click at its beat's column, before and after a change of tempo", () => {
		// Beats every 0.5 s, from the fifth on every second.
		const beats = [0, 0.5, 1, 1.5, 2, 3, 4, 5, 6];
		const rate = 100;
		const values = new Float32Array(2 * 700);
		const click = (seconds: number, size: number) => {
			values[2 * Math.round(seconds * rate)] = -size / 2;
			values[2 * Math.round(seconds * rate) + 1] = size;
		};
		click(1, 0.8);
		click(5, 0.6);
		const peaks = peaksOnBeats({ values, rate }, createBeatMap({ beats, bars: [] }), 0, 8, 80);
		const loud = [...peaks.top].flatMap((value, column) => (value > 0.1 ? [column] : []));
		expect(loud).toEqual([20, 70]);
		expect(peaks.top[20]).toBeCloseTo(0.8, 6);
		expect(peaks.bottom[70]).toBeCloseTo(-0.3, 6);
	});
});
