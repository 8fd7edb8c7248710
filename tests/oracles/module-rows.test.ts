import { describe, expect, it } from "vitest";
import { beatsOfModule, readModuleRows } from "./module-rows.ts";

/** A module of empty patterns with effects at [order, row, effect, value]; four channels, all effects on the first. */
function moduleBytes(patterns: number, effects: readonly (readonly [number, number, number, number])[]): Uint8Array {
	const bytes = new Uint8Array(1084 + patterns * 64 * 16);
	bytes[950] = patterns;
	for (let i = 0; i < patterns; i++) bytes[952 + i] = i;
	bytes.set(
		[..."M.K."].map((letter) => letter.charCodeAt(0)),
		1080,
	);
	for (const [order, row, effect, value] of effects) {
		const at = 1084 + (order * 64 + row) * 16;
		bytes[at + 2] = effect;
		bytes[at + 3] = value;
	}
	return bytes;
}

// Worked by hand from the format: a row lasts speed · 2.5 / tempo seconds, 0.12 s at first (speed 6, tempo 125).
describe("rows of a module", () => {
	it("plain: 64 rows of 0.12 s, a beat every 0.48 s", () => {
		const beats = beatsOfModule(moduleBytes(1, []));
		expect(beats).toHaveLength(16);
		expect(beats[15]).toBeCloseTo(15 * 0.48, 9);
	});

	it("speed and tempo change from their row on", () => {
		const rows = readModuleRows(
			moduleBytes(1, [
				[0, 4, 0xf, 3],
				[0, 8, 0xf, 250],
			]),
		);
		expect(rows[4].time).toBeCloseTo(0.48, 9);
		expect(rows[8].time).toBeCloseTo(0.48 + 4 * 0.06, 9);
		expect(rows[9].time).toBeCloseTo(0.72 + 0.03, 9);
	});

	it("a break goes to a row of the next pattern, a jump back ends the song, a delay stretches its row", () => {
		const rows = readModuleRows(
			moduleBytes(2, [
				[0, 3, 0xd, 0x12],
				[1, 12, 0xe, 0xe1],
				[1, 20, 0xb, 0],
			]),
		);
		expect(rows.map(({ row }) => row)).toEqual([0, 1, 2, 3, 12, 13, 14, 15, 16, 17, 18, 19, 20]);
		expect(rows[5].time - rows[4].time).toBeCloseTo(0.24, 9);
	});

	it("a loop plays its rows again", () => {
		const rows = readModuleRows(
			moduleBytes(1, [
				[0, 2, 0xe, 0x60],
				[0, 4, 0xe, 0x62],
			]),
		);
		expect(rows.slice(0, 12).map(({ row }) => row)).toEqual([0, 1, 2, 3, 4, 2, 3, 4, 2, 3, 4, 5]);
	});
});
