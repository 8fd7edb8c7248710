import { describe, expect, it } from "vitest";
import { createBeatMap, type Section } from "../../src/core/show/index.ts";
import { longestRow, pageRows } from "../../src/staves/row-layout.ts";

/** 40 bars of four at 120 a minute from 1 s. */
const grid = {
	beats: Array.from({ length: 160 }, (_, i) => 1 + i * 0.5),
	bars: Array.from({ length: 40 }, (_, i) => ({ beat: 4 * i, beatsPerBar: 4 })),
};
const beatMap = createBeatMap(grid);
const section = (letter: string, from: number, to: number): Section => ({
	id: letter + from,
	letter,
	name: "",
	from,
	to,
});

describe("lines of the page", () => {
	const sections = [section("A", 0, 32), section("B", 32, 64), section("A", 64, 96), section("C", 96, 160)];
	const rows = pageRows(sections, beatMap, 81);

	it("covers the music from the first section to the last without a gap or an overlap", () => {
		for (let i = 1; i < rows.length; i++) expect(rows[i].from).toBeCloseTo(rows[i - 1].to, 9);
		expect(rows.at(-1)?.to).toBeGreaterThanOrEqual(160);
	});

	it("gives the same letter a prime when it comes again", () => {
		expect(rows.map((row) => row.letter).filter(Boolean)).toEqual(["A", "B", "A′", "C"]);
	});

	it("starts each line on a bar and says which", () => {
		for (const row of rows.filter((one) => one.section)) {
			expect(beatMap.barAt(row.from)).toEqual({ bar: row.bar, beat: 1 });
		}
	});

	it("wraps what is longer than sixteen bars, never leaving a lost bar", () => {
		const long = pageRows([section("A", 0, 4 * 34)], beatMap, 69);
		for (const row of long.filter((one) => one.section)) {
			expect(row.to - row.from).toBeLessThanOrEqual(64 + 12);
			expect(row.to - row.from).toBeGreaterThanOrEqual(8);
		}
		expect(longestRow(long)).toBeGreaterThanOrEqual(64);
	});

	it("shows a show without sections and one without beats", () => {
		expect(pageRows([], beatMap, 81).length).toBeGreaterThan(1);
		const none = pageRows([], createBeatMap({ beats: [], bars: [] }), 30);
		expect(none.at(-1)?.to).toBeCloseTo(60, 6);
	});
});
