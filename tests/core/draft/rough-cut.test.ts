import { describe, expect, it } from "vitest";
import { roughCut } from "../../../src/core/draft/index.ts";
import type { Analysis } from "../../../src/core/music/index.ts";
import { createBeatMap, type Soundtrack, toList, transitionsInTime } from "../../../src/core/show/index.ts";

const BEAT = 60 / 108;
/** Sections of so many beats each; louder letters are louder, and busier. */
function analysisOf(plan: readonly (readonly [letter: string, beats: number, loud: number])[]): Analysis {
	const total = plan.reduce((sum, [, beats]) => sum + beats, 0);
	const beats = Float64Array.from({ length: total }, (_, i) => 0.4 + i * BEAT);
	const duration = 0.4 + total * BEAT + 2;
	let from = 0;
	const sections = plan.map(([letter, count]) => {
		const section = {
			letter,
			fromBeat: from,
			toBeat: from + count,
			start: 0.4 + from * BEAT,
			end: 0.4 + (from + count) * BEAT,
		};
		from += count;
		return section;
	});
	const rate = 10;
	const values = Float32Array.from({ length: Math.ceil(duration * rate) }, (_, i) => {
		const beat = (i / rate - 0.4) / BEAT;
		const index = sections.findIndex((one) => beat >= one.fromBeat && beat < one.toBeat);
		return plan[index]?.[2] ?? 0;
	});
	const curve = (name: string) => ({ name, rate, values });
	return {
		version: 1,
		duration,
		sampleRate: 44100,
		channels: 2,
		tempo: { bpm: 108 },
		beats,
		beatConfidence: new Float32Array(total).fill(0.9),
		bars: Array.from({ length: Math.ceil(total / 4) }, (_, i) => ({ beat: 4 * i, beatsPerBar: 4 })),
		sections,
		sectionLevels: [sections],
		moments: [],
		confidence: 0.9,
		loudness: { integrated: -14, momentary: values, shortTerm: values, rate },
		curves: ["loudness", "low", "middle", "high", "onset"].map(curve),
		peaks: { values: new Float32Array(20), rate: 10 },
		notes: [],
	};
}
const soundtrack = (analysis: Analysis): Soundtrack => ({
	file: "song.wav",
	sha256: "a".repeat(64),
	duration: analysis.duration,
	sampleRate: 44100,
	channels: 2,
});
const SONG = analysisOf([
	["A", 32, 0.3],
	["B", 32, 0.6],
	["A", 32, 0.3],
	["C", 48, 0.95],
	["B", 32, 0.6],
	["C", 48, 0.95],
]);

describe("the rough cut", () => {
	it.each([1, 2, 12, 50, 120])(
		"flies as it stands with %i drones, a transition at every section boundary at least",
		(drones) => {
			const { show, check } = roughCut(SONG, soundtrack(SONG), { drones });
			expect(check.flies).toBe(true);
			expect(check.transitions.length).toBeGreaterThanOrEqual(SONG.sections.length - 1);
			expect(show.fleet.count).toBe(drones);
		},
	);

	const cut = roughCut(SONG, soundtrack(SONG), { drones: 60, title: "Song" });

	it("lets every picture stand on a downbeat, and on each section's first", () => {
		const beatMap = createBeatMap(cut.show.grid);
		const arrivals = transitionsInTime(cut.show, beatMap).map((cue) => cue.at + cue.length);
		for (const arrival of arrivals) expect(beatMap.barAt(arrival + 1e-9).beat).toBeCloseTo(1, 6);
		for (const section of SONG.sections.slice(1))
			expect(arrivals.some((arrival) => Math.abs(arrival - section.fromBeat) < 1e-9)).toBe(true);
	});

	it("makes the same letter look alike: the same colours at its start", () => {
		const paints = new Map<string, string>();
		for (const section of SONG.sections) {
			const cue = toList(cut.show.cues).find((one) => one.kind === "colour" && one.at === section.fromBeat);
			expect(cue).toBeDefined();
			const paint = JSON.stringify(cue?.kind === "colour" && cue.paint);
			expect(paints.get(section.letter) ?? paint).toBe(paint);
			paints.set(section.letter, paint);
		}
		expect(new Set(paints.values()).size).toBe(3);
	});

	it("lets the intensity follow the loudness, and ends dark", () => {
		const levels = toList(cut.show.cues).filter((cue) => cue.kind === "intensity");
		expect(levels[0]).toMatchObject({ level: { follow: "loudness" } });
		expect(levels.at(-1)).toMatchObject({ level: 0 });
	});

	it("swells where the music is dense, and stays calm where it is not", () => {
		const kinds = (letter: string) =>
			toList(cut.show.cues).flatMap((cue) =>
				cue.kind === "colour" && cue.name.startsWith(`${letter} `) ? [cue.paint.kind] : [],
			);
		expect(kinds("C")).toContain("swell");
		expect(kinds("A")).not.toContain("swell");
	});

	it("is the same cut every time, and another for another seed", () => {
		const again = roughCut(SONG, soundtrack(SONG), { drones: 60, title: "Song" });
		expect(again.show).toEqual(cut.show);
		const other = roughCut(SONG, soundtrack(SONG), { drones: 60, title: "Song", seed: 4 });
		expect(other.check.flies).toBe(true);
		expect(other.show.formations.order).not.toEqual(cut.show.formations.order);
	});

	it("has cues numbered in the order of time", () => {
		const numbers = toList(cut.show.cues).map((cue) => Number(cue.number));
		expect(numbers).toEqual(numbers.map((_, i) => i + 1));
	});

	it("says so where no beat was heard, and still flies", () => {
		const silent: Analysis = {
			...SONG,
			beats: new Float64Array(0),
			beatConfidence: new Float32Array(0),
			bars: [],
			sections: [],
			confidence: 0,
		};
		const { check, notes } = roughCut(silent, soundtrack(silent), { drones: 20 });
		expect(check.flies).toBe(true);
		expect(notes.join(" ")).toMatch(/No beat was found/);
	});

	it("refuses a fleet of none", () => {
		expect(() => roughCut(SONG, soundtrack(SONG), { drones: 0 })).toThrow(/number of drones is 0/);
	});
});
