import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
	addCue,
	applyEdit,
	createBeatMap,
	createShow,
	cueTimes,
	deleteBeat,
	insertBeat,
	layBeats,
	moveBeat,
	patchShow,
	type Show,
	setGrid,
	setSections,
	writeShow,
} from "../../../src/core/show/index.ts";

const BEATS = Array.from({ length: 64 }, (_, i) => 0.5 + i * 0.5 + 0.02 * Math.sin(i));
const show: Show = applyEdit(createShow(2), (draft) => {
	setGrid(draft, {
		beats: BEATS,
		bars: Array.from({ length: 16 }, (_, i) => ({ beat: 4 * i, beatsPerBar: 4 })),
		source: "analysed",
	});
	setSections(draft, [
		{ id: "s1", name: "", letter: "A", from: 0, to: 32 },
		{ id: "s2", name: "", letter: "B", from: 32, to: 64 },
	]);
	for (const at of [0, 3, 8.5, 20, 33, 47.25, 60]) addCue(draft, { kind: "intensity", at, length: 2, level: 1 });
}).show;
const times = (of: Show) => {
	const beatMap = createBeatMap(of.grid);
	return of.cues.order.map((id) => cueTimes(of.cues.byId[id], beatMap));
};
const rising = (beats: readonly number[]) => beats.every((beat, k) => k === 0 || beat > beats[k - 1]);

describe("a beat moved by hand", () => {
	it("takes its neighbours along in proportion, and none beyond the anchors", () => {
		fc.assert(
			fc.property(
				fc.array(fc.tuple(fc.integer({ min: 0, max: 63 }), fc.double({ min: -0.2, max: 0.2, noNaN: true })), {
					minLength: 1,
					maxLength: 8,
				}),
				(moves) => {
					let now = show;
					for (const [index, by] of moves) {
						const before = now.grid.beats;
						const anchors = (now.grid.anchors ?? []).filter((other) => other !== index);
						try {
							now = applyEdit(now, (draft) => moveBeat(draft, index, before[index] + by)).show;
						} catch (error) {
							expect(String(error)).toContain("stays between the beats held beside it");
							continue;
						}
						expect(rising(now.grid.beats)).toBe(true);
						expect(now.grid.beats[index]).toBe(before[index] + by);
						expect(now.grid.anchors).toContain(index);
						for (const anchor of anchors) expect(now.grid.beats[anchor]).toBe(before[anchor]);
						now.grid.beats.forEach((beat, k) => {
							if (Math.abs(k - index) >= 8) expect(beat).toBe(before[k]);
						});
						// Cues stay on their beats.
						expect(now.cues).toEqual(show.cues);
					}
				},
			),
		);
	});

	it("undoes whole and survives its file", () => {
		const edit = applyEdit(show, (draft) => moveBeat(draft, 20, BEATS[20] + 0.03));
		expect(writeShow(patchShow(edit.show, edit.inverse))).toBe(writeShow(show));
		expect(JSON.parse(writeShow(edit.show)).grid.anchors).toEqual([20]);
	});
});

describe("a beat put in or taken out", () => {
	it("leaves everything at its second, and bars whole", () => {
		fc.assert(
			fc.property(fc.integer({ min: 0, max: 62 }), fc.boolean(), (index, puts) => {
				const next = applyEdit(show, (draft) => (puts ? insertBeat(draft, index) : deleteBeat(draft, index))).show;
				expect(next.grid.beats).toHaveLength(puts ? 65 : 63);
				expect(rising(next.grid.beats)).toBe(true);
				times(next).forEach(({ start, end }, k) => {
					expect(start).toBeCloseTo(times(show)[k].start, 6);
					expect(end).toBeCloseTo(times(show)[k].end, 6);
				});
				const counted = next.grid.bars.reduce((sum, bar) => sum + bar.beatsPerBar, 0);
				expect(counted).toBe(next.grid.beats.length);
				const old = createBeatMap(show.grid);
				const current = createBeatMap(next.grid);
				next.sections.forEach((section, k) => {
					expect(current.secondsAt(section.from)).toBeCloseTo(old.secondsAt(show.sections[k].from), 6);
				});
			}),
		);
	});

	it("put in and taken out again, a beat leaves the show as it was", () => {
		const there = applyEdit(show, (draft) => insertBeat(draft, 10)).show;
		const back = applyEdit(there, (draft) => deleteBeat(draft, 11)).show;
		expect(back.grid.beats).toEqual(show.grid.beats);
		expect(back.grid.bars).toEqual(show.grid.bars);
		expect(times(back).map(({ start }) => start.toFixed(6))).toEqual(times(show).map(({ start }) => start.toFixed(6)));
	});
});

describe("beats laid over a stretch", () => {
	it("as many as before take the cues along; another number leaves them at their seconds", () => {
		const moved = BEATS.slice(8, 24).map((beat) => beat + 0.04);
		const same = applyEdit(show, (draft) => layBeats(draft, moved)).show;
		expect(same.grid.beats.slice(8, 24)).toEqual(moved);
		expect(same.grid.beats).toHaveLength(64);
		expect(same.cues).toEqual(show.cues);
		expect(same.grid.bars).toEqual(show.grid.bars);
		const twice = BEATS.slice(8, 24).flatMap((beat, k) => [beat, (beat + BEATS[9 + k]) / 2]);
		const doubled = applyEdit(show, (draft) => layBeats(draft, twice)).show;
		expect(doubled.grid.beats).toHaveLength(80);
		expect(rising(doubled.grid.beats)).toBe(true);
		expect(times(doubled).map(({ start }) => start.toFixed(6))).toEqual(
			times(show).map(({ start }) => start.toFixed(6)),
		);
		expect(doubled.grid.bars.filter((bar) => bar.beat >= 8 && bar.beat < 40)).toHaveLength(8);
	});
});
