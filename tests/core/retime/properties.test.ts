import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { type EditMap, isCarried, placesOf, retimeShow } from "../../../src/core/retime/index.ts";
import { createBeatMap, cueTimes, readShow, writeShow } from "../../../src/core/show/index.ts";
import { type Kept, makeCue, makeMap, makeShow, soundtrack, transition } from "./made-maps.ts";

const OLD = 60;

/** Any edit of a minute of music: pieces in any order, some twice, with new music between, each at its own rate. */
const anyMap: fc.Arbitrary<EditMap> = fc
	.record({
		pieces: fc.array(
			fc.record({
				from: fc.double({ min: 0, max: 50, noNaN: true }),
				length: fc.double({ min: 2, max: 40, noNaN: true }),
				gap: fc.oneof(fc.constant(0), fc.double({ min: 0.5, max: 12, noNaN: true })),
				rate: fc.constantFrom(1, 1, 1, 0.95, 1.04),
			}),
			{ minLength: 0, maxLength: 5 },
		),
		outro: fc.oneof(fc.constant(0), fc.double({ min: 1, max: 10, noNaN: true })),
		spread: fc.constantFrom(0, 0.005, 0.03),
	})
	.map(({ pieces, outro, spread }) => {
		const kept: Kept[] = [];
		let at = 0;
		for (const { from, length, gap, rate } of pieces) {
			const to = Math.min(OLD, from + length);
			at += gap;
			kept.push([from, to, at, at + (to - from) / rate]);
			at += (to - from) / rate;
		}
		return makeMap(OLD, Math.max(1, at + outro), kept, spread);
	});

const anyCues = fc.array(
	fc.record({
		at: fc.double({ min: -10, max: 130, noNaN: true }),
		length: fc.oneof(fc.constant(0), fc.double({ min: 0.25, max: 24, noNaN: true })),
		kind: fc.constantFrom("intensity" as const, "transition" as const),
		pinned: fc.option(fc.double({ min: -5, max: 65, noNaN: true }), { nil: undefined }),
	}),
	{ maxLength: 20 },
);

const showOf = (cues: readonly { at: number; length: number; kind: string; pinned?: number | undefined }[]) =>
	makeShow(
		cues.map(({ at, length, kind, pinned }, i) => {
			const cue =
				kind === "transition" ? transition(`c${i + 1}`, at, length, "B") : makeCue(`c${i + 1}`, at, { length });
			return pinned === undefined ? cue : { ...cue, pinned };
		}),
	);

describe("whatever the edit", () => {
	test("no cue is lost: each is in the show or in the tray, once, as it was but for its time", () => {
		fc.assert(
			fc.property(anyMap, anyCues, (map, cues) => {
				const show = showOf(cues);
				const before = JSON.stringify(show);
				const result = retimeShow(show, map, soundtrack(map.newDuration));
				expect(JSON.stringify(show)).toBe(before);
				const kept = result.show.cues.order;
				const tray = (result.show.orphans ?? []).map(({ cue }) => cue.id);
				expect([...kept, ...tray].sort()).toEqual([...show.cues.order].sort());
				expect(result.cues.map(({ id }) => id)).toEqual(show.cues.order);
				for (const move of result.cues) {
					expect(move.newTime === null).toBe(move.status === "orphan");
					expect(move.reason.length).toBeGreaterThan(5);
					const was = show.cues.byId[move.id];
					if (move.newTime === null) continue;
					const { at: _at, length: _length, pinned: _pinned, ...rest } = was;
					expect(result.show.cues.byId[move.id]).toMatchObject(rest);
				}
			}),
			{ seed: 5, numRuns: 150 },
		);
	});

	test("the new show is one that can be written and read", () => {
		fc.assert(
			fc.property(anyMap, anyCues, (map, cues) => {
				const { show } = retimeShow(showOf(cues), map, soundtrack(map.newDuration));
				expect(readShow(writeShow(show))).toEqual(show);
			}),
			{ seed: 6, numRuns: 100 },
		);
	});

	test("a cue that moved with its music lands where the map says, to a billionth of a second", () => {
		fc.assert(
			fc.property(anyMap, anyCues, (map, cues) => {
				const show = showOf(cues);
				const result = retimeShow(show, map, soundtrack(map.newDuration));
				const beatMap = createBeatMap(result.show.grid);
				for (const move of result.cues) {
					if (move.newTime === null || move.oldTime < 0 || move.oldTime > OLD) continue;
					expect(Math.abs(cueTimes(result.show.cues.byId[move.id], beatMap).start - move.newTime)).toBeLessThan(1e-9);
					if (move.status !== "moved") continue;
					const places = placesOf(map, move.oldTime);
					expect(Math.min(...places.map(({ time }) => Math.abs(time - (move.newTime as number))))).toBeLessThan(1e-6);
				}
			}),
			{ seed: 7, numRuns: 150 },
		);
	});

	test("within one stretch order is kept: later in the old music is later in the new", () => {
		fc.assert(
			fc.property(anyMap, (map) => {
				for (const stretch of map.stretches.filter(isCarried)) {
					let last = Number.NEGATIVE_INFINITY;
					for (let old = stretch.old[0] + 0.1; old < stretch.old[1] - 0.1; old += 0.37) {
						const place = placesOf(map, old).find((one) => one.stretch === stretch);
						expect(place).toBeDefined();
						expect(place?.time).toBeGreaterThan(last);
						last = place?.time as number;
					}
				}
			}),
			{ seed: 8, numRuns: 100 },
		);
	});

	test("the grid rises, bars stand on its beats, and a beat that was kept stands where its music is", () => {
		fc.assert(
			fc.property(anyMap, (map) => {
				const show = makeShow([]);
				const { grid } = retimeShow(show, map, soundtrack(map.newDuration)).show;
				for (let i = 1; i < grid.beats.length; i++) expect(grid.beats[i]).toBeGreaterThan(grid.beats[i - 1]);
				for (let i = 1; i < grid.bars.length; i++) expect(grid.bars[i].beat).toBeGreaterThan(grid.bars[i - 1].beat);
				for (const stretch of map.stretches.filter(isCarried)) {
					// Away from joints, where two grids meet and one beat may have to go.
					const inside = show.grid.beats.filter((time) => time > stretch.old[0] + 0.6 && time < stretch.old[1] - 0.6);
					for (const time of inside) {
						const at = stretch.new[0] + (time - stretch.old[0]) / (stretch.rate ?? 1);
						expect(Math.min(...grid.beats.map((beat) => Math.abs(beat - at)))).toBeLessThan(1e-9);
					}
				}
			}),
			{ seed: 9, numRuns: 60 },
		);
	});
});
