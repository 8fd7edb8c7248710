import { describe, expect, test } from "vitest";
import { retimeAnswer, retimeShow } from "../../../src/core/retime/index.ts";
import { createBeatMap, cueTimes, readShow, writeShow } from "../../../src/core/show/index.ts";
import { makeCue, makeMap, makeShow, soundtrack, transition } from "./made-maps.ts";

/** Seconds: rounding of doubles, a ten-thousandth of a sample. */
const ROUNDING = 1e-9;

describe("cues on music that is kept", () => {
	test("the same soundtrack moves nothing, not even by rounding", () => {
		const show = makeShow([makeCue("c1", 0), makeCue("c2", 17.3, { length: 2.7 }), makeCue("c3", -3, { length: 1 })]);
		const map = { ...makeMap(60, 60, [[0, 60, 0, 60]]), verdict: "same" as const };
		const result = retimeShow(show, map, soundtrack(60));
		expect(result.show.grid).toEqual(show.grid);
		expect(result.show.sections).toEqual(show.sections);
		expect(result.show.cues).toEqual(show.cues);
		expect(result.cues.every((move) => move.status === "moved" && move.newTime === move.oldTime)).toBe(true);
		expect(result.needsReview).toBe(false);
	});

	test("after a cut every cue keeps its musical position, on a hand-corrected grid too", () => {
		const cues = Array.from({ length: 110 }, (_, i) => makeCue(`c${i + 1}`, i + (i % 3) / 3));
		const show = makeShow(cues);
		const old = createBeatMap(show.grid);
		const cut: [number, number] = [old.secondsAt(32), old.secondsAt(64)];
		const map = makeMap(60, 60 - (cut[1] - cut[0]), [
			[0, cut[0], 0, cut[0]],
			[cut[1], 60, cut[0], 60 - (cut[1] - cut[0])],
		]);
		const result = retimeShow(show, map, soundtrack(map.newDuration));
		const beatMap = createBeatMap(result.show.grid);
		for (const move of result.cues) {
			const cue = show.cues.byId[move.id];
			if (cue.at >= 32 && cue.at < 64) {
				expect(move).toMatchObject({ status: "orphan", newTime: null });
				continue;
			}
			const shift = cue.at < 32 ? 0 : cut[1] - cut[0];
			const next = result.show.cues.byId[move.id];
			expect(Math.abs(cueTimes(next, beatMap).start - (move.oldTime - shift))).toBeLessThan(ROUNDING);
			if (cue.at <= 31) expect(next.at).toBe(cue.at);
			if (cue.at >= 64) expect(next.at).toBeCloseTo(cue.at - 32, 9);
			expect(move.newTime).toBe(cueTimes(next, beatMap).start);
		}
	});

	test("a bar line stays a bar line where whole bars were cut, and a broken bar is a bar of its own", () => {
		const show = makeShow([]);
		const old = createBeatMap(show.grid);
		const cutFrom = (from: number, to: number) => {
			const [a, b] = [old.secondsAt(from), old.secondsAt(to)];
			const map = makeMap(60, 60 - (b - a), [
				[0, a, 0, a],
				[b, 60, a, 60 - (b - a)],
			]);
			return retimeShow(show, map, soundtrack(map.newDuration)).show.grid;
		};
		const whole = cutFrom(32, 64);
		expect(whole.beats).toHaveLength(88);
		expect(whole.bars.every((bar, i) => bar.beat === 4 * i && bar.beatsPerBar === 4)).toBe(true);
		const broken = cutFrom(32, 66);
		expect(broken.bars.slice(7, 11).map(({ beat, beatsPerBar }) => [beat, beatsPerBar])).toEqual([
			[28, 4],
			[32, 2],
			[34, 4],
			[38, 4],
		]);
	});

	test("a faster edit takes the grid with it: positions stay, seconds shrink", () => {
		const show = makeShow([makeCue("c1", 10), makeCue("c2", 50.5, { length: 4 })]);
		const map = makeMap(60, 60 / 1.05, [[0, 60, 0, 60 / 1.05]]);
		const result = retimeShow(show, map, soundtrack(60 / 1.05));
		expect(result.show.cues).toEqual(show.cues);
		for (const move of result.cues) expect(move.newTime).toBeCloseTo(move.oldTime / 1.05, 9);
		expect(result.needsReview).toBe(false);
	});

	test("pinned cues go by the map in seconds", () => {
		const show = makeShow([makeCue("c1", 50, { pinned: 40.123 })]);
		const result = retimeShow(show, makeMap(60, 67, [[0, 60, 7, 67]]), soundtrack(67));
		expect(result.show.cues.byId.c1.pinned).toBeCloseTo(47.123, 9);
		expect(result.cues[0]).toMatchObject({ status: "moved" });
	});

	test("cues before and after the music keep their seconds to its start and end", () => {
		const show = makeShow([makeCue("c1", -8), makeCue("c2", 130)]);
		const result = retimeShow(show, makeMap(60, 67, [[0, 60, 7, 67]]), soundtrack(67));
		const [before, after] = result.cues;
		expect(before.newTime).toBeCloseTo(before.oldTime, 9);
		expect((after.newTime as number) - 67).toBeCloseTo(after.oldTime - 60, 9);
	});
});

describe("cues that need a look", () => {
	const cutMap = makeMap(60, 44, [
		[0, 16, 0, 16],
		[32, 60, 16, 44],
	]);

	test("a transition that loses part of its music follows its own ends and says what it lost", () => {
		const result = retimeShow(makeShow([transition("c1", 28, 50, "B")]), cutMap, soundtrack(44));
		const [move] = result.cues;
		expect(move.status).toBe("review");
		expect(move.reason).toMatch(/16\.0 s of its music were cut/);
		const beatMap = createBeatMap(result.show.grid);
		const old = createBeatMap(makeShow([]).grid);
		expect(cueTimes(result.show.cues.byId.c1, beatMap).end).toBeCloseTo(old.secondsAt(78) - 16, 6);
	});

	test("a transition whose end was cut ends at the joint; one whose start was cut departs there or is an orphan", () => {
		const show = makeShow([
			transition("c1", 28, 10, "B"),
			transition("c2", 62, 12, "C"),
			transition("c3", 50, 15, "D"),
		]);
		const result = retimeShow(show, cutMap, soundtrack(44));
		const beatMap = createBeatMap(result.show.grid);
		const [first, second, third] = result.cues;
		expect(first).toMatchObject({ status: "review" });
		expect(cueTimes(result.show.cues.byId.c1, beatMap).end).toBeCloseTo(16, 6);
		expect(second).toMatchObject({ status: "review", newTime: 16 });
		expect(third).toMatchObject({ status: "orphan" });
	});

	test("a cue on the seam is marked, its neighbours aren't", () => {
		const seam = createBeatMap(makeShow([]).grid).positionAt(32);
		const show = makeShow([makeCue("c1", 20), makeCue("c2", seam), makeCue("c3", 80)]);
		expect(retimeShow(show, cutMap, soundtrack(44)).cues.map(({ status }) => status)).toEqual([
			"moved",
			"review",
			"moved",
		]);
	});

	test("a cue that music was put into is marked when it lasts far longer", () => {
		const map = makeMap(60, 70, [
			[0, 20, 0, 20],
			[20, 60, 30, 70],
		]);
		const result = retimeShow(makeShow([makeCue("c1", 36, { length: 8 })]), map, soundtrack(70));
		expect(result.cues[0].status).toBe("review");
		expect(result.cues[0].reason).toMatch(/put in/);
	});
});

describe("orphans and repeats", () => {
	const cutMap = makeMap(60, 44, [
		[0, 16, 0, 16],
		[32, 60, 16, 44],
	]);

	test("orphans wait in a tray that the file keeps, with those of an earlier retime", () => {
		const show = makeShow([makeCue("c1", 40), makeCue("c2", 10), makeCue("c3", 90)]);
		const once = retimeShow(show, cutMap, soundtrack(44));
		expect(once.show.cues.order).toEqual(["c2", "c3"]);
		expect(once.show.orphans?.map(({ cue }) => cue)).toEqual([show.cues.byId.c1]);
		expect(once.show.retimedFrom).toEqual(show.soundtrack);
		const read = readShow(writeShow(once.show));
		expect(read).toEqual(once.show);
		const twice = retimeShow(read, makeMap(44, 20, [[0, 20, 0, 20]]), soundtrack(20, "third.wav"));
		expect(twice.orphans.map(({ cue }) => cue.id)).toEqual(["c1", "c3"]);
		expect(twice.show.retimedFrom).toEqual(soundtrack(44));
	});

	test("a stretch heard twice offers its cues for the second time and adds none by itself", () => {
		const map = makeMap(60, 76, [
			[0, 40, 0, 40],
			[24, 60, 40, 76],
		]);
		const show = makeShow([makeCue("c1", 10), makeCue("c2", 60.5, { length: 2 }), makeCue("c3", 100)]);
		const result = retimeShow(show, map, soundtrack(76));
		expect(result.show.cues.order).toEqual(["c1", "c2", "c3"]);
		expect(result.offers).toHaveLength(1);
		const [offer] = result.offers;
		expect(offer.of).toBe("c2");
		expect(offer.time).toBeCloseTo(result.cues[1].oldTime + 16, 9);
		expect(offer.cue).toMatchObject({ at: 92.5, length: 2 });
		expect("id" in offer.cue || "number" in offer.cue).toBe(false);
		expect(result.needsReview).toBe(true);
	});

	test("a cue that crosses the end of a repeat goes with the pass that holds all of it", () => {
		const map = makeMap(60, 76, [
			[0, 40, 0, 40],
			[24, 60, 40, 76],
		]);
		const result = retimeShow(makeShow([transition("c1", 76, 8, "B")]), map, soundtrack(76));
		expect(result.cues[0].newTime).toBeCloseTo(result.cues[0].oldTime + 16, 9);
		expect(result.show.cues.byId.c1.length).toBe(8);
		expect(result.cues[0].status).toBe("moved");
	});
});

describe("grid and sections where music was put in", () => {
	const map = makeMap(60, 70, [
		[0, 16, 0, 16],
		[16, 60, 26, 70],
	]);

	test("without an analysis the tempo goes on", () => {
		const { grid } = retimeShow(makeShow([]), map, soundtrack(70)).show;
		expect(grid.beats).toHaveLength(140);
		for (let i = 1; i < grid.beats.length; i++) {
			expect(grid.beats[i] - grid.beats[i - 1]).toBeGreaterThan(0.45);
			expect(grid.beats[i] - grid.beats[i - 1]).toBeLessThan(0.55);
		}
	});

	test("with one its beats fill what was put in, and nothing else", () => {
		const beats = Array.from({ length: 100 }, (_, i) => i * 0.7);
		const heard = { beats, bars: [{ beat: 0, beatsPerBar: 3 }], sections: [{ start: 20, end: 70 }] };
		const show = makeShow([]);
		const { grid, sections } = retimeShow(show, map, soundtrack(70), heard).show;
		const inside = grid.beats.filter((time) => time > 16.3 && time < 25.7);
		expect(inside).toEqual(beats.filter((time) => time > 16.3 && time < 25.7));
		const after = grid.beats.filter((time) => time >= 26);
		const old = show.grid.beats.filter((time) => time >= 16).map((time) => time + 10);
		expect(after.length).toBe(old.length);
		after.forEach((time, i) => {
			expect(time).toBeCloseTo(old[i], 9);
		});
		expect(sections.map(({ name }) => name)).toEqual(["Intro", "Verse", "New music", "Verse", "Chorus"]);
		for (let i = 1; i < sections.length; i++) expect(sections[i].from).toBeGreaterThanOrEqual(sections[i - 1].to);
	});

	test("a new intro gets beats back to its start, bars counted from there", () => {
		const { grid } = retimeShow(makeShow([makeCue("c1", 0)]), makeMap(60, 68, [[0, 60, 8, 68]]), soundtrack(68)).show;
		expect(grid.beats[0]).toBeLessThan(0.6);
		expect(grid.bars.some((bar) => Math.abs(grid.beats[bar.beat] - 8) < 0.02)).toBe(true);
	});

	test("a section that was cut goes, one that was shortened stays one", () => {
		const shorter = makeMap(60, 44, [
			[0, 10, 0, 10],
			[26, 60, 10, 44],
		]);
		const { sections } = retimeShow(makeShow([]), shorter, soundtrack(44)).show;
		expect(sections.map(({ name, from, to }) => [name, from, Math.round(to)])).toEqual([
			["Intro", 0, 16],
			["Verse", 16, 32],
			["Chorus", 32, 88],
		]);
		const without = makeMap(60, 36, [
			[0, 8, 0, 8],
			[32, 60, 8, 36],
		]);
		const left = retimeShow(makeShow([]), without, soundtrack(36)).show.sections;
		expect(left.map(({ name }) => name)).toEqual(["Intro", "Chorus"]);
	});
});

describe("the answer", () => {
	test("another piece moves nothing and asks for a look at everything", () => {
		const show = makeShow([makeCue("c1", 12)]);
		const map = { ...makeMap(60, 50, []), verdict: "different" as const };
		const result = retimeShow(show, map, soundtrack(50));
		expect(result.show).toBe(show);
		expect(result.cues[0]).toMatchObject({ status: "review", newTime: result.cues[0].oldTime });
		expect(result.needsReview).toBe(true);
	});

	test("goes through JSON unchanged and holds what the command line promises", () => {
		const map = makeMap(60, 44, [
			[0, 16, 0, 16],
			[32, 60, 16, 44],
		]);
		const result = retimeShow(makeShow([makeCue("c1", 12), makeCue("c2", 40)]), map, soundtrack(44));
		const answer = retimeAnswer(map, result, { map: 1.5 });
		expect(JSON.parse(JSON.stringify(answer))).toEqual(answer);
		expect(answer.map.map(({ kind }) => kind)).toEqual(["kept", "cut", "kept"]);
		expect(answer.cues.map(({ id, status, newTime }) => [id, status, newTime === null])).toEqual([
			["c1", "moved", false],
			["c2", "orphan", true],
		]);
		expect(answer.settled).toBe(false);
	});
});
