import { describe, expect, it } from "vitest";
import { framesOf, labelOf, TIMECODE_RATES, timecodeAt } from "../../../src/core/handoff/timecode.ts";

/**
 * SMPTE ST 12-1, drop-frame compensation: "the first two frame numbers (00 and 01) shall be omitted from the count at
 * the start of each minute except minutes 00, 10, 20, 30, 40 and 50". Counted label by label, as the rule says it.
 */
function* dropFrameLabels(): Generator<string> {
	const two = (value: number): string => String(value).padStart(2, "0");
	for (let minute = 0; minute < 24 * 60; minute++) {
		for (let second = 0; second < 60; second++) {
			for (let frame = 0; frame < 30; frame++) {
				if (second === 0 && frame < 2 && minute % 10 !== 0) continue;
				yield `${two(Math.floor(minute / 60))}:${two(minute % 60)}:${two(second)};${two(frame)}`;
			}
		}
	}
}

describe("timecode", () => {
	it("counts a whole day of drop-frame labels as the rule of ST 12-1 lists them, there and back", () => {
		let frame = 0;
		const wrong: string[] = [];
		for (const label of dropFrameLabels()) {
			// Every label around the minutes, and every 97th in between: a day has 2.6 million.
			if (frame % 97 === 0 || /:00;0|:59;2/.test(label)) {
				if (labelOf(frame, "29.97") !== label || framesOf(label, "29.97") !== frame) wrong.push(`${frame} ${label}`);
			}
			frame++;
		}
		expect(wrong).toEqual([]);
		expect(frame).toBe(2_589_408);
	});

	it("keeps drop-frame labels within two frames of the clock all day, and loses 86.4 ms over 24 hours", () => {
		for (let second = 0; second < 86400; second += 7) {
			const [hours, minutes, seconds, frames] = timecodeAt(second, { rate: "29.97", start: "00:00:00:00" })
				.split(/[:;]/)
				.map(Number);
			const said = hours * 3600 + minutes * 60 + seconds + frames / 30;
			expect(Math.abs(said - second)).toBeLessThan(0.18);
		}
		expect((2_589_408 * 1001) / 30000 - 86400).toBeCloseTo(-0.0864, 6);
	});

	it("counts whole frames at 24, 25 and 30", () => {
		expect(timecodeAt(0, { rate: "25", start: "01:00:00:00" })).toBe("01:00:00:00");
		expect(timecodeAt(61.48, { rate: "25", start: "01:00:00:00" })).toBe("01:01:01:12");
		expect(timecodeAt(3599.999, { rate: "24", start: "00:00:00:00" })).toBe("01:00:00:00");
		expect(timecodeAt(1 / 30, { rate: "30", start: "00:00:00:00" })).toBe("00:00:00:01");
	});

	it("takes the nearest frame, goes before the music's zero, and round the day", () => {
		expect(timecodeAt(0.019, { rate: "25", start: "01:00:00:00" })).toBe("01:00:00:00");
		expect(timecodeAt(0.021, { rate: "25", start: "01:00:00:00" })).toBe("01:00:00:01");
		expect(timecodeAt(-47.2, { rate: "25", start: "01:00:00:00" })).toBe("00:59:12:20");
		expect(timecodeAt(-1, { rate: "29.97", start: "00:00:00:00" })).toBe("23:59:59;00");
	});

	it("brings every label back at every rate", () => {
		for (const rate of TIMECODE_RATES) {
			for (let frame = 0; frame < 200_000; frame += 37) expect(framesOf(labelOf(frame, rate), rate)).toBe(frame);
		}
	});

	it("says which labels can't be", () => {
		expect(() => framesOf("01:00:00:25", "25")).toThrow(/"01:00:00:25" can't be at 25 .* ff from 00 to 24\.$/);
		expect(() => framesOf("1:0:0", "25")).toThrow(/hh:mm:ss:ff/);
		expect(() => framesOf("24:00:00:00", "25")).toThrow(/within a day/);
		expect(() => framesOf("00:01:00:01", "29.97")).toThrow(/the next that it counts is 00:01:00:02\.$/);
		expect(framesOf("00:10:00:00", "29.97")).toBe(17982);
	});
});
